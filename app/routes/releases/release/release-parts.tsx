import { FactsTable } from '~/components/facts-table'
import type { ReleasePage } from '~/domain/releases/release-page.server'

export function Facts({ page, number }: { page: ReleasePage; number: number }) {
  const at = (code: string) => page.findings.findIndex((f) => f.code === code)
  return (
    <FactsTable
      number={number}
      caption="What the maintainer declares, beside what Fettle measured in the files."
      rows={page.factRows.map(({ differs, ...row }) => ({
        ...row,
        differs: differs === undefined ? undefined : { href: at(differs) < 0 ? '#found' : `#f${at(differs) + 1}` }
      }))}
    />
  )
}

const words = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten']
const many = (n: number, one: string) => `${words[n] ?? n} ${n === 1 ? one : `${one}s`}`

/** "two cautions and three notes, and nothing that stops a board house". */
export function foundInWords(findings: ReleasePage['findings']): string {
  const count = (severity: string) => findings.filter((f) => f.severity === severity).length
  const [stops, cautions, notes] = [count('stop'), count('caution'), count('note')]
  if (findings.length === 0) return 'nothing'
  const softer = [cautions > 0 && many(cautions, 'caution'), notes > 0 && many(notes, 'note')].filter(Boolean).join(' and ')
  if (stops === 0) return `${softer}, and nothing that stops a board house`
  return `${many(stops, 'stop')}${softer ? `, besides ${softer}` : ''}`
}
