import type { ReactNode } from 'react'
import { BoardAtScale, BoardDrawing } from '~/components/board-drawing'
import { FactsTable } from '~/components/facts-table'
import { Figure } from '~/components/figure'
import { Finding } from '~/components/finding'
import { Table } from '~/components/table'
import { describeFinding } from '~/domain/bundle/describe-finding'
import type { FindingCode } from '~/domain/bundle/finding-codes'
import type { ReleasePage } from '~/domain/releases/release-page.server'

export type FindingRow = ReleasePage['findings'][number]

/** The last part of a path; the whole of it stands in the title. */
const baseName = (path: string) => path.split('/').at(-1) ?? path

/** Both sides, drawn from the files: the top with its dimensions on the millimetre grid, the bottom beside it smaller. */
export function BoardFigures({ page }: { page: ReleasePage }) {
  const { board, release, facts, pictures } = page
  if (!facts || facts.width === null || facts.height === null)
    return <p className="soft">The outline could not be measured, so the board is not drawn.</p>
  const size = { width: facts.width, height: facts.height }
  const name = `${board.name} ${release.version}`
  if (!pictures.top)
    return (
      <p className="soft">
        {size.width.toFixed(1)} × {size.height.toFixed(1)} mm. The layers could not be drawn.
      </p>
    )
  return (
    <>
      <Figure
        number={1}
        span="hang"
        caption={
          <>
            Top side, drawn from the {release.state === 'draft' ? 'uploaded' : 'released'} files. Places are counted from 0, 0; a
            small square is 1 mm. <a href={pictures.top}>Open large</a>
          </>
        }
      >
        <BoardDrawing src={pictures.top} alt={`Top side of ${name}`} {...size} />
      </Figure>
      {pictures.bottom && (
        <Figure
          number={2}
          caption={
            <>
              Bottom side, seen from below. <a href={pictures.bottom}>Open large</a>
            </>
          }
        >
          <BoardAtScale src={pictures.bottom} alt={`Bottom side of ${name}`} {...size} columns={{ wide: 390, narrow: 326 }} />
        </Figure>
      )}
    </>
  )
}

/** How many figures `BoardFigures` draws. */
export const drawnFigures = ({ facts, pictures }: ReleasePage) =>
  !pictures.top || !facts || facts.width === null || facts.height === null ? 0 : pictures.bottom ? 2 : 1

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

/** One finding; on a draft with what can be done about it. */
export function FindingEntry({
  finding,
  place,
  isDraft,
  children
}: {
  finding: FindingRow
  place: number
  isDraft?: boolean
  children?: ReactNode
}) {
  const { title, advice } = describeFinding(finding.code as FindingCode)
  return (
    <Finding
      id={`f${place}`}
      severity={finding.severity}
      heading={title}
      where={
        <>
          {finding.file !== null && <span title={finding.file}>{baseName(finding.file)}: </span>}
          {finding.message}
        </>
      }
      expected={finding.expected}
      found={finding.found}
      code={finding.code}
      answer={
        finding.answer !== null && !isDraft
          ? { on: finding.answeredOn ?? undefined, text: <span className="whitespace-pre-line">{finding.answer}</span> }
          : undefined
      }
    >
      {isDraft && finding.severity !== 'note' && <p className="small soft mt-2">{advice}</p>}
      {children}
    </Finding>
  )
}

const words = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten']
const many = (n: number, one: string) => `${words[n] ?? n} ${n === 1 ? one : `${one}s`}`

/** "two cautions and three notes, and nothing that stops a board house". */
export function foundInWords(findings: readonly FindingRow[]): string {
  const count = (severity: string) => findings.filter((f) => f.severity === severity).length
  const [stops, cautions, notes] = [count('stop'), count('caution'), count('note')]
  if (findings.length === 0) return 'nothing to remark'
  const softer = [cautions > 0 && many(cautions, 'caution'), notes > 0 && many(notes, 'note')].filter(Boolean).join(' and ')
  if (stops === 0) return `${softer}, and nothing that stops a board house`
  return `${many(stops, 'stop')}${softer ? `, besides ${softer}` : ''}`
}

const told = { attribute: 'its own attribute', name: 'its name', content: 'its content' } as const
const layerFunctions = ['copper', 'soldermask', 'paste', 'legend', 'outline', 'drill-plated', 'drill-nonplated', 'drill']

/** Copper first, from the top down, then what lies on it, the outline and the drills; top before bottom. */
const stackPlace = (f: ReleasePage['files'][number]) =>
  layerFunctions.indexOf(f.function) * 1000 + (f.layer_index ?? (f.side === 'bottom' ? 500 : 0))

export function Layers({ page, number }: { page: ReleasePage; number: number }) {
  const layers = page.files.filter((f) => layerFunctions.includes(f.function)).sort((a, b) => stackPlace(a) - stackPlace(b))
  const others = page.files.filter((f) => !layerFunctions.includes(f.function))
  if (page.files.length === 0) return <p className="soft">No file of the bundle could be read.</p>
  return (
    <>
      <Table
        number={number}
        className="lay"
        caption={`${layers.length} of ${page.files.length} files make the board.`}
        rows={layers}
        rowKey={(f) => f.file}
        isDense
        columns={[
          {
            key: 'layer',
            head: 'Layer',
            weight: 'bold',
            cell: (f) => (f.function === 'copper' && f.layer_index !== null ? `L${f.layer_index}` : '')
          },
          { key: 'file', head: 'File', isRowHead: true, cell: (f) => <span title={f.file}>{baseName(f.file)}</span> },
          { key: 'function', head: 'Function', cell: (f) => f.function },
          { key: 'side', head: 'Side', cell: (f) => f.side ?? '' },
          {
            key: 'told',
            head: 'Told by',
            only: 'sheet',
            weight: 'soft',
            cell: (f) => told[f.evidence as keyof typeof told] ?? f.evidence
          }
        ]}
      />
      {others.length > 0 && (
        <p className="small soft mt-3">
          The other {others.length === 1 ? 'one' : others.length}:{' '}
          {others.map((f) => `${baseName(f.file)} (${f.function})`).join(', ')}.
        </p>
      )}
    </>
  )
}
