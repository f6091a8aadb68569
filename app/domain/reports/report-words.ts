/* The words of a report as the database, the API and the forms have them, and how a page says them. */

export const evidenceGrades = ['measured', 'code-read', 'symptom-only', 'none'] as const
export const installMethods = ['iron', 'hot-air', 'hot-plate', 'several'] as const
export const firstPowerResults = ['works', 'partly', 'no-change', 'worse'] as const
export const statements = ['running', 'failed', 'parted'] as const
export const causes = ['board', 'fitting', 'other-fault', 'wrong-diagnosis', 'accident', 'unknown'] as const
export const exclusionKinds = ['duplicate', 'other-board', 'not-plausible', 'withdrawn-by-author'] as const

export type EvidenceGrade = (typeof evidenceGrades)[number]
export type InstallMethod = (typeof installMethods)[number]
export type FirstPower = (typeof firstPowerResults)[number]
export type Statement = (typeof statements)[number]
export type Cause = (typeof causes)[number]
export type ExclusionKind = (typeof exclusionKinds)[number]

type Said<T extends string> = Record<T, { label: string; hint?: string }>

export const evidenceWords: Said<EvidenceGrade> = {
  measured: { label: 'I measured it', hint: 'ripple, voltage, resistance or capacitor value' },
  'code-read': { label: 'The console showed a code' },
  'symptom-only': { label: 'Only from the symptom' },
  none: { label: 'I did not check' }
}

/** The grade as a fact on somebody's report. */
export const evidenceFact: Record<EvidenceGrade, string> = {
  measured: 'measured',
  'code-read': 'read from a code',
  'symptom-only': 'from the symptom only',
  none: 'not checked'
}

export const methodWords: Said<InstallMethod> = {
  iron: { label: 'Soldering iron' },
  'hot-air': { label: 'Hot air' },
  'hot-plate': { label: 'Hot plate' },
  several: { label: 'Several of these' }
}

export const firstPowerWords: Said<FirstPower> = {
  works: { label: 'Works', hint: 'as it should, everything tried' },
  partly: { label: 'Partly', hint: 'better, something is still wrong' },
  'no-change': { label: 'No change', hint: 'the same fault as before' },
  worse: { label: 'Worse', hint: 'a new fault, smoke, or dead' }
}

export const causeWords: Said<Cause> = {
  board: { label: 'The board itself', hint: 'a part or a joint of the assembled board gave way' },
  fitting: { label: 'The fitting', hint: 'a bridge, a cold joint, a lifted pad, the wrong way round' },
  'other-fault': { label: 'Another fault of the console', hint: 'the board was sound, something else had failed too' },
  'wrong-diagnosis': { label: 'Wrong diagnosis', hint: 'the fault lay elsewhere from the start' },
  accident: { label: 'An accident', hint: 'a fall, a spill, the wrong supply' },
  unknown: { label: 'I do not know', hint: 'counts against the board until it is known' }
}

export const statementWords: Said<Statement> = {
  running: { label: 'Still runs' },
  failed: { label: 'Failed' },
  parted: { label: 'No longer with me', hint: 'sold, scrapped or lost' }
}

export const exclusionWords: Record<ExclusionKind, { label: string; one: string; many: string }> = {
  duplicate: { label: 'The same fitting was reported before', one: 'duplicate', many: 'duplicates' },
  'other-board': { label: 'It is about another board', one: 'other board', many: 'other boards' },
  'not-plausible': { label: 'It cannot be as it says', one: 'not plausible', many: 'not plausible' },
  'withdrawn-by-author': { label: 'Its author asked for it', one: 'withdrawn by its author', many: 'withdrawn by their authors' }
}

/** The choices of a question, in the table's order. */
export const choicesOf = <T extends string>(words: Said<T>) =>
  (Object.entries(words) as [T, { label: string; hint?: string }][]).map(([value, said]) => ({ value, ...said }))
