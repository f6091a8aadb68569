import { describe, expect, it } from 'vitest'
import { can, visitor, type Action, type Actor, type Subjects } from './can'

const member: Actor = { userId: 'm', displayName: 'M', isSteward: false, maintains: new Map() }
const maintainer: Actor = { userId: 'k', displayName: 'K', isSteward: false, maintains: new Map([['b1', 'maintainer']]) }
const owner: Actor = { userId: 'o', displayName: 'O', isSteward: false, maintains: new Map([['b1', 'owner']]) }
const steward: Actor = { userId: 's', displayName: 'S', isSteward: true, maintains: new Map() }
const everyone = { visitor, member, maintainer, owner, steward }

const draft = { boardId: 'b1', state: 'draft' } as const
const released = { boardId: 'b1', state: 'released' } as const
const withdrawn = { boardId: 'b1', state: 'withdrawn' } as const
const report = { reporterId: 'm', isExcluded: false }

/** The whole table, written out a second time as DESIGN's roles have it: who may, for each action and subject. */
const expected: { [A in Action]: [Subjects[A], (keyof typeof everyone)[]][] } = {
  'board.open': [[null, ['member', 'maintainer', 'owner', 'steward']]],
  'board.edit': [
    [{ boardId: 'b1' }, ['maintainer', 'owner']],
    [{ boardId: 'b2' }, []]
  ],
  'board.name-maintainers': [[{ boardId: 'b1' }, ['owner']]],
  'release.draft': [[{ boardId: 'b1' }, ['maintainer', 'owner']]],
  'release.see': [
    [draft, ['maintainer', 'owner']],
    [released, ['visitor', 'member', 'maintainer', 'owner', 'steward']],
    [withdrawn, ['visitor', 'member', 'maintainer', 'owner', 'steward']]
  ],
  'release.edit': [
    [draft, ['maintainer', 'owner']],
    [released, []]
  ],
  'release.publish': [
    [draft, ['maintainer', 'owner']],
    [released, []],
    [withdrawn, []]
  ],
  'release.withdraw': [
    [draft, []],
    [released, ['maintainer', 'owner', 'steward']],
    [withdrawn, []]
  ],
  'release.download': [
    [draft, ['maintainer', 'owner']],
    [withdrawn, ['visitor', 'member', 'maintainer', 'owner', 'steward']]
  ],
  'report.file': [[null, ['member', 'maintainer', 'owner', 'steward']]],
  'report.check-in': [
    [report, ['member']],
    [{ ...report, isExcluded: true }, []],
    [{ reporterId: null, isExcluded: false }, []]
  ],
  'report.exclude': [
    [report, ['steward']],
    [{ ...report, isExcluded: true }, []]
  ],
  'site.steward': [[null, ['steward']]]
}

describe('can', () => {
  for (const action of Object.keys(expected) as Action[])
    for (const [subject, allowed] of expected[action] as [Subjects[typeof action], string[]][])
      for (const [role, actor] of Object.entries(everyone))
        it(`${role} ${allowed.includes(role) ? 'may' : 'may not'} ${action} ${JSON.stringify(subject)}`, () => {
          expect(can(actor, action, subject)).toBe(allowed.includes(role))
        })
})
