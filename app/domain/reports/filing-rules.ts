import type { Day } from '~/lib/dates'
import type { FieldError } from '~/lib/domain-error'

/** What the things named in a report turn out to be; null where there is no such thing. */
export type FilingFacts = {
  release: { id: string; state: 'draft' | 'trial' | 'released' | 'withdrawn'; consoleId: string } | null
  revision: { consoleId: string } | null
  /** Undefined when no tag was given. */
  unit: { releaseId: string; boardName: string; version: string } | null | undefined
}
export type FilingDates = { installedOn: Day; today: Day; latest: Day }

/** Earlier than any board here can have been fitted; catches a mistyped year. */
export const earliestInstall: Day = '1970-01-01'

/** What keeps a well-formed report from being filed, at its fields. A withdrawn release or a bad fit is no reason: those reports matter most. */
export function filingErrors({ release, revision, unit }: FilingFacts, dates: FilingDates): FieldError[] {
  const errors: FieldError[] = []
  const say = (path: string, message: string) => errors.push({ path, message })
  if (release === null || release.state === 'draft') say('release', 'There is no such published release. Choose one of the list.')
  if (revision === null) say('revision', 'There is no such console revision. Choose one of the list.')
  else if (release !== null && release.consoleId !== revision.consoleId)
    say('revision', 'This revision belongs to another console than the board is made for.')
  if (unit === null) say('unit_tag', 'No unit has this tag. Read the label again, or leave it empty for an untagged board.')
  else if (unit && release !== null && unit.releaseId !== release.id)
    say('unit_tag', `This unit is a ${unit.boardName} ${unit.version}, not the release chosen here.`)
  if (dates.installedOn > dates.latest) say('installed_on', `${dates.installedOn} has not come yet. Today is ${dates.today}.`)
  else if (dates.installedOn < earliestInstall) say('installed_on', 'This is before any of these boards existed. Check the year.')
  return errors
}

/** A unit tag as printed: upper case, without spaces around or inside. */
export const normalTag = (text: string): string => text.toUpperCase().replace(/\s+/g, '')
