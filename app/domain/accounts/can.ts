/** Who asks. A visitor has no `userId`; `maintains` holds the boards of a member and the part they have in each. */
export type Actor = {
  userId: string | null
  displayName: string | null
  isSteward: boolean
  maintains: ReadonlyMap<string, 'owner' | 'maintainer'>
}

export const visitor: Actor = { userId: null, displayName: null, isSteward: false, maintains: new Map() }

type BoardSubject = { boardId: string }
type ReleaseSubject = { boardId: string; state: 'draft' | 'trial' | 'released' | 'withdrawn' }
type ReportSubject = { reporterId: string | null; isExcluded: boolean }

/** Every action that needs a decision, with what it is done to. */
export type Subjects = {
  'board.open': null
  'board.edit': BoardSubject
  'board.name-maintainers': BoardSubject
  'release.draft': BoardSubject
  'release.see': ReleaseSubject
  'release.edit': ReleaseSubject
  'release.publish': ReleaseSubject
  'release.withdraw': ReleaseSubject
  'release.download': ReleaseSubject
  'report.file': null
  'report.check-in': ReportSubject
  'report.exclude': ReportSubject
  'site.steward': null
}
export type Action = keyof Subjects

const isMember = (actor: Actor) => actor.userId !== null
const maintains = (actor: Actor, boardId: string) => actor.maintains.has(boardId)

/** The one table of who may do what; routes, use cases and pages all ask it. */
const rules: { [A in Action]: (actor: Actor, subject: Subjects[A]) => boolean } = {
  'board.open': (actor) => isMember(actor),
  'board.edit': (actor, board) => maintains(actor, board.boardId),
  'board.name-maintainers': (actor, board) => actor.maintains.get(board.boardId) === 'owner',
  'release.draft': (actor, board) => maintains(actor, board.boardId),
  'release.see': (actor, release) => release.state !== 'draft' || maintains(actor, release.boardId),
  'release.edit': (actor, release) => release.state === 'draft' && maintains(actor, release.boardId),
  'release.publish': (actor, release) => release.state === 'draft' && maintains(actor, release.boardId),
  'release.withdraw': (actor, release) =>
    (release.state === 'trial' || release.state === 'released') && (maintains(actor, release.boardId) || actor.isSteward),
  'release.download': (actor, release) => release.state !== 'draft' || maintains(actor, release.boardId),
  'report.file': (actor) => isMember(actor),
  'report.check-in': (actor, report) => isMember(actor) && actor.userId === report.reporterId && !report.isExcluded,
  'report.exclude': (actor, report) => actor.isSteward && !report.isExcluded,
  'site.steward': (actor) => actor.isSteward
}

/** Whether `actor` may do `action` to `subject`. Pure; the answer depends on nothing else. */
export function can<A extends Action>(actor: Actor, action: A, subject: Subjects[A]): boolean {
  return rules[action](actor, subject)
}
