import { describe, expect, it } from 'vitest'
import type { BundlePart } from '~/domain/bundle/bundle-check.types'
import { readPartValue } from '~/domain/bundle/read-part-value'
import { partsTable, readingInWords } from './part-rows'

const part = (designators: string[], value: string, isFitted = true): BundlePart => ({
  designators,
  quantity: null,
  value,
  footprint: '',
  description: '',
  isFitted,
  reading: readPartValue({ designator: designators[0]!, value, isFitted })
})
const plain = (text: string | null) => text?.replace(/\u00a0/g, ' ')

describe('the parts of a release', () => {
  it.each([
    ['C1', '4u7 20% 6.3V X5R 0603', 'capacitor, 4.7 µF ±20 %, 6.3 V, X5R, 0603'],
    ['C1', '10uF -20%/+80%', 'capacitor, 10 µF −20/+80 %'],
    ['R1', 'R010 1W 1% 2512', 'resistor, 10 mΩ ±1 %, 1 W, 2512'],
    ['C1', '330uF 2.5V 9mR', 'capacitor, 330 µF, 2.5 V, ESR 9 mΩ']
  ])('%s %s in words', (name, value, words) => expect(plain(readingInWords(part([name], value).reading))).toBe(words))

  it('are counted by kind and by what is not fitted', () => {
    const table = partsTable([part(['C1', 'C2', 'C3'], '100n'), part(['R1'], '10k', false), part(['U1', 'U2'], 'logic')])
    expect(table).toMatchObject({ lines: 3, parts: 6, notFitted: 1, left: 0 })
    expect(table.kinds).toEqual([
      { kind: 'capacitor', count: 3 },
      { kind: 'other', count: 2 },
      { kind: 'resistor', count: 1 }
    ])
    expect(table.rows.map((row) => row.quantity)).toEqual([3, 1, 2])
    // A reason only where a value was looked for.
    expect(table.rows[2]!.unread).toBeNull()
    expect(partsTable([part(['C1'], 'mystery')]).rows[0]!.unread).toMatch(/without guessing/)
  })

  it('are bounded', () => {
    const table = partsTable(Array.from({ length: 500 }, (_, i) => part([`R${i}`], '1k')))
    expect([table.rows.length, table.left, table.lines]).toEqual([400, 100, 500])
  })
})
