import { describe, expect, it } from 'vitest'
import { DomainError } from '~/lib/domain-error'
import { visitor, type Actor } from './can'
import { must } from './must'

const member: Actor = { userId: 'm', displayName: 'M', isSteward: false, maintains: new Map() }
const kindOf = (work: () => void) => {
  try {
    work()
    return 'allowed'
  } catch (error) {
    return error instanceof DomainError ? error.kind : 'another error'
  }
}

describe('must', () => {
  it('lets pass what the table allows, sends a visitor to sign in, and refuses a member', () => {
    expect(kindOf(() => must(member, 'board.open', null))).toBe('allowed')
    expect(kindOf(() => must(visitor, 'board.open', null))).toBe('unauthenticated')
    expect(kindOf(() => must(member, 'board.edit', { boardId: 'b' }))).toBe('forbidden')
    expect(kindOf(() => must(visitor, 'release.see', { boardId: 'b', state: 'draft' }))).toBe('unauthenticated')
    expect(kindOf(() => must(visitor, 'release.see', { boardId: 'b', state: 'released' }))).toBe('allowed')
  })
})
