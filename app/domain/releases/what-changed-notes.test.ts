import { describe, expect, it } from 'vitest'
import { renderMarkdown } from '~/server/markdown.server'
import { startNotes, whatChangedNotes } from './what-changed-notes'
import type { MovedGroup, WhatChanged } from './what-changed.types'

const nothing: WhatChanged = {
  since: '1.0.0',
  version: '1.1.0',
  revision: null,
  outline: null,
  layers: [],
  drill: null,
  facts: [],
  declared: [],
  added: [],
  removed: [],
  altered: [],
  moved: [],
  shift: null,
  marks: [],
  notCompared: []
}
const words = { value: '1uF', footprint: 'C_0603', description: '', isFitted: true }
const move = (designator: string, more: Partial<MovedGroup> = {}): MovedGroup => ({
  designators: [designator],
  dx: 0.25,
  dy: 0,
  distance: 0.25,
  turn: 0,
  toSide: null,
  ...more
})
const notes = (more: Partial<WhatChanged>) => whatChangedNotes({ ...nothing, ...more })

describe('whatChangedNotes', () => {
  it('says it in plain words', () => {
    expect(
      notes({
        revision: { name: 'boardRevision', before: 'A', after: 'B' },
        outline: { before: { width: 38, height: 14 }, after: { width: 40, height: 14 }, isSameSize: false },
        layers: [
          { change: 'added', layer: { function: 'copper', side: 'inner', index: 2 } },
          { change: 'added', layer: { function: 'copper', side: 'inner', index: 3 } },
          { change: 'changed', layer: { function: 'copper', side: 'top', index: 1 } },
          { change: 'removed', layer: { function: 'paste', side: 'bottom', index: null } }
        ],
        drill: {
          before: { plated: 40, nonPlated: 2, unknown: 0, slots: 0 },
          after: { plated: 77, nonPlated: 2, unknown: 0, slots: 1 }
        },
        facts: [{ name: 'minTrack', before: 0.2, after: 0.125 }],
        declared: [{ name: 'thicknessMm', before: 1.6, after: null }],
        added: [{ designators: ['C15', 'C16'], ...words }],
        removed: [{ designators: ['R9'], ...words, value: '', footprint: '', isFitted: false }],
        altered: [
          { designators: ['C11'], changes: [{ name: 'value', before: '1uF 16V', after: '1uF 10V' }] },
          { designators: ['D1', 'D2'], changes: [{ name: 'fitted', before: 'no', after: 'yes' }] }
        ],
        moved: [
          move('C7', { dx: -0.25, dy: 1 }),
          move('L1', { distance: 0, dx: 0, turn: -90 }),
          move('U1', { toSide: 'bottom', turn: null })
        ],
        shift: { dx: 0, dy: -2, parts: 18, of: 20 },
        notCompared: [{ what: 'layer', missingIn: 'before', layer: { function: 'drill', side: null, index: null } }]
      })
    ).toBe(`Changed since 1.0.0:

- New board revision: B (before A).
- The outline differs: 40.0 × 14.0 mm (before 38.0 × 14.0 mm).
- Copper layer 2 and copper layer 3 are new.
- Paste bottom is gone.
- Copper top differs.
- The drilled holes differ: 77 plated, 2 not plated, 1 of them slots (before 40 plated, 2 not plated).
- Narrowest track: 0.125 mm (before 0.20 mm).
- Thickness to order: not stated (before 1.6 mm).
- Added: **C15** and **C16** (1uF, C_0603).
- Removed: **R9** (not fitted).
- **C11**: value 1uF 10V (before 1uF 16V).
- **D1** and **D2**: are fitted now.
- 18 of 20 placed parts lie 2.00 mm down, counted from the board's lower left corner.
- Moved: **C7**, 0.25 mm to the left and 1.00 mm up.
- Moved: **L1**, turned by 90° to the right.
- Moved: **U1**, 0.25 mm to the right, now on the bottom side.
- The drilled holes could not be read in 1.0.0, and so not compared.`)
  })

  it('does not say twice how many layers there are', () => {
    const layers = (before: number, after: number) => ({
      facts: [{ name: 'copperLayers' as const, before, after }],
      declared: [{ name: 'layers' as const, before: 2, after: 4 }]
    })
    expect(notes(layers(2, 4))).not.toContain('- Copper layers: ')
    expect(notes(layers(2, 6))).toContain('- Copper layers: 6 (before 2).')
  })

  it('has nothing to say where nothing changed', () => expect(notes({})).toBeNull())

  it('keeps long lists short and says how many there are', () => {
    const many = Array.from({ length: 300 }, (_, i) => `R${i + 1}`)
    expect(notes({ added: [{ designators: many, ...words }] })).toContain('**R12** and 288 more (1uF')
    const each = notes({ moved: many.map((name, i) => move(name, { dx: i + 1 })) })!
    expect(each).toContain('And 288 more of this kind.')
    const long = 'x'.repeat(5000)
    const altered = many.map((name) => ({
      designators: [name],
      changes: (['value', 'footprint', 'description'] as const).map((field) => ({
        name: field,
        before: `${name}${long}`,
        after: long
      }))
    }))
    const text = notes({ altered, added: many.map((name) => ({ designators: [name], ...words, value: `${name}${long}` })) })!
    expect(text.length).toBeLessThanOrEqual(6000)
    expect(text).toMatch(/\n- And \d+ more differences\.$/)
  })

  it.each([
    '*bold* **very** _so_ __so__ a_b ~~gone~~',
    '[a](https://evil.example) ![p](x.png) <b>b</b> <https://evil.example>',
    'https://evil.example www.evil.example me@evil.example ftp://evil.example',
    '`code` ```fence``` \\* &amp; &#42; &lt;',
    '- item\n\n# head\n> quote\r\n1. one | a | b |\n--- | ---',
    '<script>alert(1)</script>',
    '10k, 1 %, ±5 %, 4.7 µF (X7R)'
  ])('lets nothing in a value mark up: %s', (value) => {
    const html = String(
      renderMarkdown(notes({ added: [{ designators: [value], value, footprint: '', description: '', isFitted: true }] })!)
    )
    expect(html.replace(/<\/?(p|ul|li|strong)>/g, '')).not.toMatch(/<[a-z]/i)
    expect(html.match(/<li>/g)).toHaveLength(1)
    const entities = { '&amp;': '&', '&lt;': '<', '&gt;': '>', '&quot;': '"', '&#39;': "'" }
    const text = html.replace(/<[^>]*>/g, '').replace(/&(amp|lt|gt|quot|#39);/g, (e) => entities[e as keyof typeof entities])
    expect(text).toContain(value.replace(/[\r\n]+/g, ' '))
  })
})

describe('startNotes', () => {
  it('puts them first, once, and loses nothing', () => {
    expect(startNotes('Changed.', '  \r\n')).toEqual({ outcome: 'started', notes: 'Changed.' })
    const first = startNotes('Changed:\n\n- a', 'Mine.\r\n\r\nTwo.')
    expect(first).toEqual({ outcome: 'started', notes: 'Changed:\n\n- a\n\nMine.\n\nTwo.' })
    const sentBack = first.notes.replace(/\n/g, '\r\n')
    expect(startNotes('Changed:\n\n- a', sentBack)).toEqual({ outcome: 'stands-already', notes: sentBack })
    expect(startNotes(null, 'Mine.')).toEqual({ outcome: 'nothing-changed', notes: 'Mine.' })
    const long = 'x'.repeat(19_990)
    expect(startNotes('Changed.', long)).toEqual({ outcome: 'too-long', notes: long })
  })
})
