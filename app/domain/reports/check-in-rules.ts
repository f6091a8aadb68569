import type { Day } from '~/lib/dates'
import type { FieldError } from '~/lib/domain-error'
import type { Statement } from './report-words'

/** What has been said of a unit so far, as far as it bounds what can be said next. */
export type SaidSoFar = {
  installedOn: Day
  /** The day of the latest `running` check-in. */
  lastRunningOn: Day | null
  failedOn: Day | null
  partedOn: Day | null
}

/** `statedOn` is null where the day could not be read, which is said elsewhere. */
export type NewStatement = { statement: Statement; statedOn: Day | null; lastRunningOn: Day | null; cause: string | null }

/** Why nothing more can be said of a unit; null while its history is open. */
export function whyEnded(said: SaidSoFar): string | null {
  if (said.failedOn !== null) return `This unit failed on ${said.failedOn}; its history ends there.`
  if (said.partedOn !== null) return `This unit was parted with on ${said.partedOn}; its history ends there.`
  return null
}

/**
 * What is wrong with a new statement about a unit whose history is open. Its day lies neither before the installation, nor after `latest`, nor
 * before an earlier `running`; a failure names its cause, and its last working day lies between the latest `running` and the day found.
 * A failure may be dated before the report was filed: it is then listed apart from the curve when the report was late.
 *
 * @param latest the last day that today can be anywhere on earth
 */
export function statementErrors(said: SaidSoFar, next: NewStatement, latest: Day): FieldError[] {
  const errors: FieldError[] = []
  const say = (path: string, message: string) => errors.push({ path, message })
  const field = 'stated_on'
  if (next.statedOn !== null && next.statedOn > latest) say(field, `${next.statedOn} has not come yet.`)
  else if (next.statedOn !== null && next.statedOn < said.installedOn)
    say(field, `This lies before the day it was fitted, ${said.installedOn}.`)
  else if (said.lastRunningOn !== null && next.statedOn !== null && next.statedOn < said.lastRunningOn)
    say(field, `It was said to run on ${said.lastRunningOn}. Give that day or a later one.`)
  if (next.statement !== 'failed') return errors
  if (next.cause === null) say('cause', 'Say what it came from; “I do not know” is an answer too.')
  if (next.lastRunningOn !== null) {
    if (next.statedOn !== null && next.lastRunningOn > next.statedOn)
      say('last_running_on', `This lies after the day the failure was found, ${next.statedOn}.`)
    else if (next.lastRunningOn < said.installedOn)
      say('last_running_on', `This lies before the day it was fitted, ${said.installedOn}. Leave it empty when you do not know.`)
    else if (said.lastRunningOn !== null && next.lastRunningOn < said.lastRunningOn)
      say('last_running_on', `It was said to run on ${said.lastRunningOn}. Give that day or a later one, or leave it empty.`)
  }
  return errors
}
