import type { Day } from '~/lib/dates'
import type { FieldError } from '~/lib/domain-error'

/** What the things named in a report turn out to be: null where there is no such thing, undefined where none was named. */
export type FilingFacts = {
  release: { id: string; state: 'draft' | 'trial' | 'released' | 'withdrawn'; consoleId: string } | null | undefined
  revision: { consoleId: string } | null | undefined
  unit: { releaseId: string; boardName: string; version: string } | null | undefined
}
export type FilingDates = { installedOn: Day | undefined; today: Day; latest: Day }

/** Earlier than any board here can have been fitted; catches a mistyped year. */
export const earliestInstall: Day = '1970-01-01'

/** What keeps a report from being filed, at its fields, as far as it is well-formed. A withdrawn release or a bad fit is no reason: those reports matter most. */
export function filingErrors({ release, revision, unit }: FilingFacts, dates: FilingDates): FieldError[] {
  const errors: FieldError[] = []
  const say = (path: string, message: string) => errors.push({ path, message })
  if (release === null || release?.state === 'draft')
    say('release', 'There is no such published release. Choose one of the list.')
  if (revision === null) say('revision', 'There is no such console revision. Choose one of the list.')
  else if (release && revision && release.consoleId !== revision.consoleId)
    say('revision', 'This revision belongs to another console than the board is made for.')
  if (unit === null) say('unit_tag', 'No unit has this tag. Read the label again, or leave it empty for an untagged board.')
  else if (unit && release && unit.releaseId !== release.id)
    say('unit_tag', `This unit is a ${unit.boardName} ${unit.version}, not the release chosen here.`)
  if (dates.installedOn === undefined) return errors
  if (dates.installedOn > dates.latest) say('installed_on', `${dates.installedOn} has not come yet. Today is ${dates.today}.`)
  else if (dates.installedOn < earliestInstall) say('installed_on', 'This is before any of these boards existed. Check the year.')
  return errors
}

/** A unit tag as printed: upper case, without spaces around or inside. */
export const normalTag = (text: string): string => text.toUpperCase().replace(/\s+/g, '')

/** What an answer calls for: said where it was given, and no reason to turn the report away. */
export type FilingWarning = { severity: 'caution' | 'note'; heading: string; text: string; because: string }
export type WarnedOf = {
  version: string
  state: 'draft' | 'trial' | 'released' | 'withdrawn'
  withdrawnReason: string | null
  revisionCode: string
  claim: 'fits' | 'fits-with-care' | 'does-not-fit' | 'untested'
  claimReason: string
  boardName: string
  unit: { tag: string; reports: number } | null
}

/** The warnings that the release, the revision and the unit call for, the weightiest first. */
export function filingWarnings(of: WarnedOf): FilingWarning[] {
  const warnings: FilingWarning[] = []
  const { version, revisionCode, boardName, unit } = of
  const choseRevision = `Shown because you chose ${revisionCode}.`
  const choseRelease = `Shown because you chose ${version}.`
  if (of.claim === 'does-not-fit')
    warnings.push({
      severity: 'caution',
      heading: `${boardName} does not fit ${revisionCode}`,
      text: `${of.claimReason} If you have fitted it all the same, file it: what went wrong, or right, is worth knowing.`.trim(),
      because: choseRevision
    })
  if (of.state === 'withdrawn')
    warnings.push({
      severity: 'caution',
      heading: `Release ${version} is withdrawn`,
      text: `${of.withdrawnReason ?? ''} Reports on it count, and matter most: how those that are fitted are doing.`.trim(),
      because: choseRelease
    })
  if (of.claim === 'fits-with-care')
    warnings.push({
      severity: 'caution',
      heading: `Fits ${revisionCode} with care`,
      text: of.claimReason,
      because: choseRevision
    })
  if (unit !== null && unit.reports > 0)
    warnings.push({
      severity: 'caution',
      heading: `${unit.tag} has been reported before`,
      text: 'File another report only when it was taken out and fitted anew. To say how it is doing, add a check-in to the first report.',
      because: 'Shown because of the unit tag.'
    })
  if (of.claim === 'untested')
    warnings.push({
      severity: 'note',
      heading: `Untested on ${revisionCode}`,
      text: 'Nobody has claimed that it fits there. Yours may be the report that settles it.',
      because: choseRevision
    })
  if (of.state === 'trial')
    warnings.push({
      severity: 'note',
      heading: `${version} is a trial`,
      text: 'It was published to be tried. Its reports are counted under its own version.',
      because: choseRelease
    })
  return warnings
}
