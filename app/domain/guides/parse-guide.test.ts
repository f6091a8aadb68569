import { describe, expect, it } from 'vitest'
import { parseGuide, placeOf } from './parse-guide'

describe('parseGuide', () => {
  it('takes heading, lead, opening and sections apart', () => {
    const guide = parseGuide(
      '\n# Tea\n\nHow to\nmake it.\n\nFirst of all.\n\n## Water {#water}\n\nBoil it.\n\n### Hard\n\nOr not.\n\n## Leaves & pot\n\nOne each.\n'
    )
    expect(guide).toEqual({
      heading: 'Tea',
      lead: 'How to make it.',
      opening: 'First of all.',
      sections: [
        { id: 'water', heading: 'Water', markdown: 'Boil it.\n\n### Hard\n\nOr not.' },
        { id: 'leaves-pot', heading: 'Leaves & pot', markdown: 'One each.' }
      ]
    })
  })

  it('leaves headings in code alone', () => {
    const guide = parseGuide('# A\n\nLead.\n\n## B\n\n```sh\n## no heading\n~~~\n```\n\n## C\n\nx')
    expect(guide.sections.map((s) => s.heading)).toEqual(['B', 'C'])
    expect(guide.sections[0]!.markdown).toContain('## no heading')
  })

  it.each([
    ['no heading', 'Text.\n'],
    ['a second-level heading first', '## Two\n\nText.'],
    ['no lead', '# A\n\n## B\n\nText.'],
    ['a place named twice', '# A\n\nLead.\n\n## B {#x}\n\n1\n\n## C {#x}\n\n2']
  ])('refuses %s', (_what, text) => {
    expect(() => parseGuide(text)).toThrow(/guide/i)
  })

  it('makes a place from words', () => {
    expect(placeOf('What’s “new” in 1.1?')).toBe('what-s-new-in-1-1')
  })
})
