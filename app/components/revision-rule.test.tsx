import { renderToStaticMarkup } from 'react-dom/server'
import { describe, expect, it } from 'vitest'
import { canBeRuled, RevisionRule } from './revision-rule'

const years = (...list: (number | null)[]) => list.map((builtFrom) => ({ builtFrom }))

describe('canBeRuled', () => {
  it.each([
    [years(1988, 1989, 1995), 1996, true],
    [years(1988, 1989), null, true],
    [years(1988, 1988), 1990, false],
    [years(1990, 1988), 1990, false],
    [years(1988, null), 1990, false],
    [years(1988), 1990, false],
    [years(1988, 1992), 1991, false],
    [[], 1991, false]
  ])('%j until %j: %j', (revisions, until, can) => {
    expect(canBeRuled(revisions, until)).toBe(can)
  })
})

it('draws every revision and says it in words, twice for the two widths', () => {
  const html = renderToStaticMarkup(
    <RevisionRule
      revisions={[
        { code: 'TP-1', from: 1991 },
        { code: 'TP-2', from: 1992 }
      ]}
      until={1993}
    />
  )
  expect(html.match(/aria-label="Years: TP-1 from 1991, TP-2 from 1992"/g)).toHaveLength(2)
  expect(html.match(/>TP-2<\/text>/g)).toHaveLength(2)
  expect(html).not.toContain('NaN')
})
