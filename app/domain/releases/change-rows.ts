import {
  declaredNames,
  drillSentence,
  factNames,
  factsToSay,
  fieldWords,
  layerSentences,
  moveWords,
  notComparedWords,
  outlineSentence,
  partWords,
  shiftWords,
  shortened,
  valueWords
} from './change-words'
import { isUnchanged } from './what-changed'
import type { AlteredGroup, PartMark, PartsGroup, WhatChanged } from './what-changed.types'

/** Rows of one table, names in one cell, characters of one value, and marks in the drawing. */
const mostRows = 40
const mostNames = 16
const longestValue = 160
const mostMarks = 120

/** What differs before and after, as printed; shortened ends say how many rows are left out. */
export type ChangeRow = { what: string; before: string; after: string }
export type MoveRow = { what: string; how: string }
export type Shortened<Row> = { rows: Row[]; more: number }

/** What a page shows of what changed: bounded, all in words. */
export type ChangesShown = {
  since: string
  isUnchanged: boolean
  revision: { before: string; after: string } | null
  sentences: string[]
  details: ChangeRow[]
  parts: Shortened<ChangeRow>
  moved: Shortened<MoveRow>
  marks: PartMark[]
  notCompared: string[]
}

const cut = (text: string) =>
  text.length > longestValue ? `${text.slice(0, longestValue - 1).replace(/[\ud800-\udbff]$/, '')}…` : text
const names = (designators: readonly string[]) => shortened(designators.map(cut), mostNames)
const few = <Row>(rows: readonly Row[]): Shortened<Row> => ({
  rows: rows.slice(0, mostRows),
  more: Math.max(0, rows.length - mostRows)
})

const whole = (group: PartsGroup) => cut(partWords(group) || 'no more is said of it')
const added = (group: PartsGroup): ChangeRow => ({ what: names(group.designators), before: 'none', after: whole(group) })
const removed = (group: PartsGroup): ChangeRow => ({ what: names(group.designators), before: whole(group), after: 'none' })

function altered({ designators, changes }: AlteredGroup): ChangeRow {
  const words = (when: 'before' | 'after') => changes.map((change) => cut(fieldWords(change, change[when]))).join('; ')
  return { what: names(designators), before: words('before'), after: words('after') }
}

/** What changed, as the page of a release shows it. */
export function changeRows(c: WhatChanged): ChangesShown {
  const details = [
    ...factsToSay(c).map((f) => ({ ...f, format: factNames[f.name], what: `${factNames[f.name].name}, measured` })),
    ...c.declared.map((d) => ({ ...d, format: declaredNames[d.name], what: `${declaredNames[d.name].name}, declared` }))
  ]
  return {
    since: c.since,
    isUnchanged: isUnchanged(c),
    revision: c.revision && { before: String(c.revision.before), after: String(c.revision.after) },
    sentences: [
      ...layerSentences(c.layers),
      ...(c.drill ? [drillSentence(c.drill)] : []),
      ...(c.outline ? [outlineSentence(c.outline)] : []),
      ...(c.shift ? [`${shiftWords(c.shift)}.`] : [])
    ],
    details: details.map(({ what, before, after, format }) => ({
      what,
      before: valueWords(before, format),
      after: valueWords(after, format)
    })),
    parts: few([...c.added.map(added), ...c.removed.map(removed), ...c.altered.map(altered)]),
    moved: few(c.moved.map((group) => ({ what: names(group.designators), how: moveWords(group) }))),
    marks: c.marks.slice(0, mostMarks),
    notCompared: c.notCompared.map((n) => notComparedWords(n, c.since, c.version))
  }
}
