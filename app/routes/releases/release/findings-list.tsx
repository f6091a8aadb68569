import type { ReactNode } from 'react'
import { boardViewer, numberedPlaces } from './board-viewer'
import { BoardDetail } from '~/components/board-detail'
import { Finding } from '~/components/finding'
import { placeInWords, type NumberedPlace } from '~/components/finding-places'
import { showMark } from '~/components/layer-viewer'
import { SubHeading } from '~/components/section'
import { describeFinding } from '~/domain/bundle/describe-finding'
import type { FindingCode } from '~/domain/bundle/finding-codes'
import type { ReleasePage } from '~/domain/releases/release-page.server'

export type FindingRow = ReleasePage['findings'][number]

const groups = [
  ['stop', 'Stop', { published: '', draft: 'to mend before it can be published' }],
  ['caution', 'Caution', { published: 'to know before ordering', draft: 'to answer before it can be published' }],
  ['note', 'Note', { published: 'nothing need be done', draft: 'nothing need be done' }]
] as const

/** So many of a group stand open; the rest is folded, so that a page with hundreds stays a page. */
const openOnes = 10

export type FindingsListProps = {
  page: ReleasePage
  isDraft?: boolean
  /** What stands under a finding: the field for its answer. */
  under?: (finding: FindingRow) => ReactNode
  /** Whether a finding must be seen, such as one whose answer was refused. */
  mustShow?: (finding: FindingRow) => boolean
}

/** The findings by severity, each with its place on the board where it has one. */
export function FindingsList({ page, isDraft, under, mustShow = () => false }: FindingsListProps) {
  const places = numberedPlaces(page)
  const all = page.findings.map((finding, i) => ({ finding, number: i + 1, place: places[i] ?? null }))
  const entry = ({ finding, number, place }: (typeof all)[number]) => (
    <FindingEntry key={finding.id} page={page} finding={finding} number={number} place={place} isDraft={isDraft}>
      {under?.(finding)}
    </FindingEntry>
  )
  return groups.map(([severity, word, meaning]) => {
    const group = all.filter(({ finding }) => finding.severity === severity)
    if (group.length === 0) return null
    const folded = group.slice(openOnes)
    return [
      <SubHeading key={severity} id={`found-${severity}`}>
        {word}: {group.length} <span className="soft font-normal">{meaning[isDraft ? 'draft' : 'published']}</span>
      </SubHeading>,
      ...group.slice(0, openOnes).map(entry),
      folded.length > 0 && (
        <details key={`${severity}-more`} className="more" open={folded.some(({ finding }) => mustShow(finding)) || undefined}>
          <summary>
            {folded.length} more of {group.length}
          </summary>
          <div className="more-in">{folded.map(entry)}</div>
        </details>
      )
    ]
  })
}

/** The last part of a path; the whole of it stands in the title. */
const baseName = (path: string) => path.split('/').at(-1) ?? path

type FindingEntryProps = {
  page: ReleasePage
  finding: FindingRow
  number: number
  place: NumberedPlace | null
  isDraft?: boolean
  children?: ReactNode
}

/** One finding; on a draft with what can be done about it. */
function FindingEntry({ page, finding, number, place, isDraft, children }: FindingEntryProps) {
  const { title, advice } = describeFinding(finding.code as FindingCode)
  return (
    <Finding
      id={`f${number}`}
      severity={finding.severity}
      heading={title}
      where={
        <>
          {finding.file !== null && <span title={finding.file}>{baseName(finding.file)}: </span>}
          {finding.message}
        </>
      }
      place={
        finding.place && (
          <>
            {placeInWords(finding.place)}
            {place && (
              <>
                {' '}
                <a className="place" {...showMark(boardViewer, { number: place.number, side: finding.place.side })}>
                  Show on the board, place {place.number}
                </a>
              </>
            )}
          </>
        )
      }
      expected={finding.expected}
      found={finding.found}
      code={finding.code}
      detail={place ? detailOf(page, place) : undefined}
      answer={
        finding.answer !== null && !isDraft
          ? { on: finding.answeredOn ?? undefined, text: <span className="whitespace-pre-line">{finding.answer}</span> }
          : undefined
      }
    >
      {isDraft && (
        <p className="small mt-2">
          <b>What to do:</b> {advice}
        </p>
      )}
      {children}
    </Finding>
  )
}

function detailOf({ pictureBox, pictures, board, release }: ReleasePage, { number, side, x, y }: NumberedPlace) {
  const src = pictures[side]
  if (!src || !pictureBox) return undefined
  const size = { width: pictureBox.maxX - pictureBox.minX, height: pictureBox.maxY - pictureBox.minY }
  return {
    drawing: (
      <BoardDetail src={src} alt={`${side} side of ${board.name} ${release.version}`} {...size} x={x} y={y} number={number} />
    ),
    caption: `${side === 'top' ? 'Top side' : 'Bottom side, seen from below'}, 9 mm across.`
  }
}
