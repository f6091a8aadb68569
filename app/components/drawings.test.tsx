import { renderToStaticMarkup as render } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { clockwise } from './balloons'
import { BoardAtScale, BoardDrawing, commonScale } from './board-drawing'
import { BoardDetail } from './board-detail'
import { gridPaths } from './mm-grid'
import { ReleaseLine } from './release-line'
import { namePlaces, revisionStretches, timeScale, yearMarks, type LineRelease } from './release-line-layout'

const board = { src: '/top.svg', alt: 'Top side of Buttress', width: 38, height: 14 }

describe('gridPaths', () => {
  const box = { left: 0, right: 100, top: 0, bottom: 60, originX: 10, originY: 50, scale: 10 }
  it('counts from 0, 0: the 5 mm lines lie on multiples of five', () => {
    const { fine, coarse } = gridPaths(box)
    expect(coarse).toBe('M10 0V60M60 0V60M0 50H100M0 0H100')
    expect(fine).toContain('M0 0V60')
    expect(fine).not.toContain('M10 0V60')
  })
  it('draws only 5 mm lines under 7.5 px a millimetre', () => {
    expect(gridPaths({ ...box, scale: 7.4 }).fine).toBe('')
    expect(gridPaths({ ...box, scale: 7.5 }).fine).not.toBe('')
  })
})

describe('boards', () => {
  it('carry their measures as dimension lines and in the description', () => {
    const html = render(<BoardDrawing {...board} />)
    expect(html.match(/aria-label="Top side of Buttress, 38\.0 mm wide and 14\.0 mm high"/g)).toHaveLength(2)
    expect(html.match(/>38\.0 mm</g)).toHaveLength(2)
    expect(html).not.toMatch(/ style=|NaN/)
  })
  it('are drawn to scale: the picture keeps the proportion of the outline', () => {
    const [, w, h] = /<image[^>]*width="([\d.]+)"[^>]*height="([\d.]+)"/.exec(render(<BoardDrawing {...board} />))!
    expect(Number(w) / Number(h)).toBeCloseTo(38 / 14, 2)
  })
  it('share one scale when compared', () => {
    const scale = commonScale(540, [38, 62])
    const widths = [38, 62].map((width) => {
      const html = render(
        <BoardAtScale {...board} width={width} columns={{ wide: 540, narrow: 328 }} scales={{ wide: scale, narrow: 5 }} />
      )
      return Number(/<image[^>]*width="([\d.]+)"/.exec(html)![1]) / width
    })
    expect(widths[0]).toBeCloseTo(widths[1]!, 2)
    expect(62 * scale).toBeLessThan(540)
  })
  it('number places clockwise from the top left', () => {
    const places = [{ x: 5, y: 1 }, { x: 30, y: 13 }, { x: 30, y: 1 }, { x: 5, y: 13 }] // prettier-ignore
    expect(clockwise(places, 14)).toEqual([{ x: 5, y: 13 }, { x: 30, y: 13 }, { x: 30, y: 1 }, { x: 5, y: 1 }]) // prettier-ignore
  })
  it('enlarge the very place', () => {
    // 9 mm over 236 px; the middle of the picture is the place
    const html = render(<BoardDetail {...board} x={0} y={14} number={3} />)
    expect(html).toContain('x="118" y="59"')
    expect(html).toContain('Detail of Top side of Buttress, place 3')
  })
})

const release = (version: string, on: string, boardRevision = 'A', state: LineRelease['state'] = 'released'): LineRelease => ({
  version,
  on,
  boardRevision,
  state,
  href: `/boards/b/releases/${version}`
})

describe('release line', () => {
  const today = '2026-12-01'
  it('places first release and today at its ends, time between them in proportion', () => {
    const at = timeScale('2022-12-01', today)
    expect([at('2022-12-01'), at(today)]).toEqual([118, 989])
    expect(at('2024-11-30')).toBeCloseTo((118 + 989) / 2, 0)
  })
  it('stands when the only release is of today', () => {
    const html = render(<ReleaseLine board="B" releases={[release('1.0.0', today)]} today={today} />)
    expect(html).not.toMatch(/NaN|Infinity| style=/)
  })
  it('hangs a name left when its right neighbour is near, and one row down when there is no room', () => {
    const names = [300, 330, 345, 500].map((x) => ({ x, room: 100 }))
    expect(namePlaces(names)).toEqual([
      { anchor: 'end', row: 0 },
      { anchor: 'start', row: 0 },
      { anchor: 'start', row: 1 },
      { anchor: 'start', row: 0 }
    ])
  })
  it('draws only the dot where there is no room at all', () =>
    expect(namePlaces([1, 2, 3, 4, 5].map((x) => ({ x: 300 + x, room: 100 }))).at(-1)).toBeNull())
  it('gives each board revision its stretch', () => {
    const releases = [release('1.0.0', '2022-01-01'), release('1.1.0', '2023-01-01'), release('2.0.0', '2024-01-01', 'B')]
    expect(revisionStretches(releases, today)).toEqual([
      { revision: 'A', from: '2022-01-01', to: '2024-01-01', isOpen: false },
      { revision: 'B', from: '2024-01-01', to: today, isOpen: true }
    ])
  })
  it('marks the years', () =>
    expect(yearMarks('2023-03-01', today).filter((m) => m.label).map((m) => m.label)).toEqual(['2023', '2024', '2025', '2026'])) // prettier-ignore
  it('links the others, marks the shown one, and says the state', () => {
    const releases = [release('1.0.0', '2022-01-01'), release('0.9.0-rc.1', '2021-01-01', 'A', 'trial')]
    const html = render(<ReleaseLine board="B" releases={releases} shown="1.0.0" today={today} />)
    expect(html).toContain('aria-label="Releases of B"')
    expect(html).toContain('aria-label="0.9.0-rc.1, trial, 2021-01-01"')
    expect(html).toContain('<li aria-current="true">')
    expect(html).not.toContain('href="/boards/b/releases/1.0.0"')
  })
})
