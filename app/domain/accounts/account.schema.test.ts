import { describe, expect, it } from 'vitest'
import { cleanDisplayName, displayNameField, emailField } from './account.schema'

const messageOf = (result: { error?: { issues: { message: string }[] } }) => result.error?.issues[0]?.message

describe('the display name', () => {
  it.each([
    ['Ada', 'Ada'],
    ['  Ada   of\tthe Workshop ', 'Ada of the Workshop'],
    ['Zoe\u0308', 'Zoë'],
    ['修理屋', '修理屋']
  ])('takes %j as %j', (given, kept) => {
    expect(displayNameField.parse(given)).toBe(kept)
  })

  it.each([
    [undefined, 'Enter the name that others should see.'],
    ['   ', 'Enter the name that others should see.'],
    ['x'.repeat(61), 'Use 60 characters at most.'],
    ['a\u200bb', 'Leave out invisible control characters.'],
    ['a\u202eb', 'Leave out invisible control characters.'],
    ['a\u0000b', 'Leave out invisible control characters.']
  ])('refuses %j', (given, message) => {
    expect(messageOf(displayNameField.safeParse(given))).toBe(message)
  })

  it('is made out of what another service calls somebody', () => {
    expect(cleanDisplayName(' A\u202eda\n Lovelace-Example ')).toBe('A da Lovelace-Example')
    expect(cleanDisplayName('\u200b')).toBeNull()
    expect(cleanDisplayName(null)).toBeNull()
    const long = cleanDisplayName('𝒳'.repeat(100))!
    expect(long.length).toBeLessThanOrEqual(60)
    expect(long).not.toMatch(/[\ud800-\udbff]$/)
  })
})

describe('the e-mail address', () => {
  it('is kept in lower case', () => {
    expect(emailField.parse('  Ada.Example+x@Test.Example ')).toBe('ada.example+x@test.example')
  })

  it.each([
    '',
    'a',
    'a@',
    '@b.example',
    'a b@test.example',
    'a@b',
    'a@test.example,b@test.example',
    'a@test.example\nx',
    'Ada <a@test.example>'
  ])('refuses %j', (given) => {
    expect(emailField.safeParse(given).success).toBe(false)
  })

  /* RFC 5321, section 4.5.3.1.3: a path has 256 octets with its brackets. */
  it('has at most 254 characters', () => {
    const local = 'x'.repeat(60)
    const domain = (n: number) => `${'a'.repeat(60)}.${'b'.repeat(60)}.${'c'.repeat(n)}.example`
    expect(emailField.safeParse(`${local}@${domain(62)}`).success).toBe(true)
    expect(messageOf(emailField.safeParse(`${local}@${domain(63)}.${'d'.repeat(40)}`))).toMatch(/254/)
  })
})
