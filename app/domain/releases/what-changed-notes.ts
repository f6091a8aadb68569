import { escapeMarkdown } from '~/lib/escape-markdown'
import {
  declaredNames,
  factNames,
  factsToSay,
  fieldNames,
  drillSentence,
  layerSentences,
  moveWords,
  mostNames,
  notComparedWords,
  outlineSentence,
  partWords,
  shiftWords,
  shortened,
  valueWords
} from './change-words'
import { isUnchanged } from './what-changed'
import type { AlteredGroup, WhatChanged } from './what-changed.types'

/** Lines of one kind, characters of one value that comes from a file, and characters in all. */
const mostLines = 12
const longestValue = 90
const longestNotes = 6000

const plain = (text: string) =>
  escapeMarkdown(text.length > longestValue ? `${text.slice(0, longestValue - 1).replace(/[\ud800-\udbff]$/, '')}…` : text)
const names = (designators: readonly string[]) =>
  shortened(
    designators.map((d) => `**${plain(d)}**`),
    mostNames
  )

/** The first lines of a kind, and how many are left out. */
function few(lines: string[]): string[] {
  return lines.length <= mostLines ? lines : [...lines.slice(0, mostLines), `And ${lines.length - mostLines} more of this kind.`]
}

const isOne = (list: readonly unknown[]) => list.length === 1

function alteredLine({ designators, changes }: AlteredGroup): string {
  const said = changes.map(({ name, before, after }) => {
    const one = isOne(designators)
    if (name === 'fitted') return after === 'yes' ? `${one ? 'is' : 'are'} fitted now` : `${one ? 'is' : 'are'} no longer fitted`
    if (name === 'placed')
      return after === 'yes'
        ? `${one ? 'stands' : 'stand'} in the placement file now`
        : `no longer ${one ? 'stands' : 'stand'} in the placement file`
    const was = before === null ? 'before none' : `before ${plain(String(before))}`
    return `${fieldNames[name]} ${after === null ? 'none' : plain(String(after))} (${was})`
  })
  return `${names(designators)}: ${said.join('; ')}.`
}

const from = (before: string, after: string) => `${plain(after)} (before ${plain(before)})`

/**
 * What changed as the start of a release's notes: Markdown, a line and a list. What comes from files is escaped; long lists are shortened with a
 * count, and the whole never passes 6 000 characters. Null where nothing changed that could be compared.
 */
export function whatChangedNotes(c: WhatChanged): string | null {
  if (isUnchanged(c)) return null
  const lines: string[] = []
  if (c.revision) lines.push(`New board revision: ${from(String(c.revision.before), String(c.revision.after))}.`)
  if (c.outline) lines.push(outlineSentence(c.outline))
  lines.push(...layerSentences(c.layers))
  if (c.drill) lines.push(drillSentence(c.drill))
  for (const { name, before, after } of factsToSay(c))
    lines.push(`${factNames[name].name}: ${from(valueWords(before, factNames[name]), valueWords(after, factNames[name]))}.`)
  for (const { name, before, after } of c.declared)
    lines.push(
      `${declaredNames[name].name} to order: ${from(valueWords(before, declaredNames[name]), valueWords(after, declaredNames[name]))}.`
    )
  const parts = (word: string, groups: WhatChanged['added']) =>
    few(
      groups.map((group) => {
        const words = [group.value, group.footprint].some(Boolean) || !group.isFitted ? ` (${plain(partWords(group))})` : ''
        return `${word}: ${names(group.designators)}${words}.`
      })
    )
  lines.push(...parts('Added', c.added), ...parts('Removed', c.removed), ...few(c.altered.map(alteredLine)))
  if (c.shift) lines.push(`${plain(shiftWords(c.shift))}.`)
  lines.push(...few(c.moved.map((group) => `Moved: ${names(group.designators)}, ${moveWords(group)}.`)))
  lines.push(...few(c.notCompared.map((n) => escapeMarkdown(notComparedWords(n, c.since, c.version)))))
  return assembled(`Changed since ${escapeMarkdown(c.since)}:`, lines)
}

/** The lines that fit, whole. */
function assembled(head: string, lines: readonly string[]): string {
  const kept = [...lines]
  const text = () => {
    const left = lines.length - kept.length
    return [head, '', ...kept.map((line) => `- ${line}`), ...(left > 0 ? [`- And ${left} more differences.`] : [])].join('\n')
  }
  while (text().length > longestNotes) kept.pop()
  return text()
}

/** The longest notes that the form takes (see `draftSchema`). */
const mostCharacters = 20_000

export type StartedNotes = { outcome: 'started' | 'stands-already' | 'too-long' | 'nothing-changed'; notes: string }

/** Puts what changed before the notes that are there, once; nothing of them is lost. */
export function startNotes(changed: string | null, notes: string): StartedNotes {
  if (changed === null) return { outcome: 'nothing-changed', notes }
  const written = notes.replace(/\r\n?/g, '\n')
  if (written.includes(changed)) return { outcome: 'stands-already', notes }
  const started = written.trim() === '' ? changed : `${changed}\n\n${written}`
  // a browser sends each line's end as two characters
  return started.replace(/\n/g, '\r\n').length > mostCharacters
    ? { outcome: 'too-long', notes }
    : { outcome: 'started', notes: started }
}
