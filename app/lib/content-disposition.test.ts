import { describe, expect, it } from 'vitest'
import { attachment } from './content-disposition'

describe('attachment', () => {
  it.each([
    ['buttress-1.1.0.zip', 'attachment; filename="buttress-1.1.0.zip"'],
    ['a-1.0.0+build.5.zip', 'attachment; filename="a-1.0.0+build.5.zip"'],
    ['a"b\\c.zip', `attachment; filename="a_b_c.zip"; filename*=UTF-8''a%22b%5Cc.zip`],
    ['€ rates.zip', `attachment; filename="_ rates.zip"; filename*=UTF-8''%E2%82%AC%20rates.zip`],
    ['a\r\nX: 1', `attachment; filename="a__X: 1"; filename*=UTF-8''a%0D%0AX%3A%201`]
  ])('names %j', (name, header) => expect(attachment(name)).toBe(header))
})
