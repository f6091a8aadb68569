import { expect, it } from 'vitest'
import { csvCell, csvFile } from './csv'

// RFC 4180, section 2, rules 5 to 7; the formula guard after OWASP, "CSV Injection".
it.each([
  ['plain', 'plain'],
  ['a,b', '"a,b"'],
  ['say "so"', '"say ""so"""'],
  ['two\r\nlines', '"two\r\nlines"'],
  ['=1+1', "'=1+1"],
  ['-2', "'-2"],
  ['@sum(A1)', "'@sum(A1)"],
  ['+a,b', `"'+a,b"`],
  [-2, '-2'],
  [0.1, '0.1'],
  [null, '']
])('%j becomes %s', (value, cell) => {
  expect(csvCell(value)).toBe(cell)
})

it('writes head and rows with CRLF', () => {
  expect(csvFile(['a', 'b'], [['x', 1]])).toBe('a,b\r\nx,1\r\n')
})
