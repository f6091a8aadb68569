import { Figure } from '~/components/figure'
import { PartMarks, type PartMarkShown } from '~/components/part-marks'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import type { ChangesShown } from '~/domain/releases/change-rows'
import type { ReleasePage } from '~/domain/releases/release-page.server'
import { releasePath } from '~/domain/releases/release-path'

export type WhatChangedSectionProps = {
  page: ReleasePage
  number: number
  /** The numbers that its first figure and its first table have on the page. */
  figure: number
  table: number
}

type Side = 'top' | 'bottom'
const sides = ['top', 'bottom'] as const

/** The marks of one side as that side is seen: the bottom is mirrored left to right. A part that changed its side shows on the new one. */
function marksOf(marks: ChangesShown['marks'], side: Side, width: number): PartMarkShown[] {
  const seen = (place: { x: number; y: number } | null) => place && { x: side === 'top' ? place.x : width - place.x, y: place.y }
  return marks
    .filter(({ from, to }) => (to ?? from)?.side === side)
    .map(({ designator, kind, from, to }) => ({ designator, kind, from: seen(from), to: seen(to) }))
}

function drawings({ changes, pictures, pictureBox, facts }: ReleasePage) {
  const box = pictureBox ?? { minX: 0, minY: 0, maxX: facts?.width ?? 0, maxY: facts?.height ?? 0 }
  const [width, height] = [box.maxX - box.minX, box.maxY - box.minY]
  if (!changes || width <= 0 || height <= 0) return []
  return sides.flatMap((side) => {
    const marks = marksOf(changes.marks, side, width)
    const src = pictures[side]
    return src !== null && marks.length > 0 ? [{ side, src, marks, width, height }] : []
  })
}

/** How many figures the section draws. */
export const changeFigures = (page: ReleasePage) => drawings(page).length

const counted = (n: number, one: string) => (n > 0 ? [`${n} ${one}`] : [])

/** "9 parts moved, 1 new, 2 gone". */
function marksInWords(marks: readonly PartMarkShown[]) {
  const count = (kind: PartMarkShown['kind']) => marks.filter((m) => m.kind === kind).length
  return [...counted(count('moved'), 'moved'), ...counted(count('added'), 'new'), ...counted(count('removed'), 'gone')].join(', ')
}

function legend(marks: readonly PartMarkShown[], since: string) {
  const has = (kind: PartMarkShown['kind']) => marks.some((m) => m.kind === kind)
  return [
    has('moved') && `Moved: dashed ring where it was in ${since}, disc where it is now.`,
    has('added') && 'Disc with a plus: new.',
    has('removed') && 'Ring with a cross: gone.'
  ]
    .filter(Boolean)
    .join(' ')
}

/** What a release changed since the one before it: in sentences, drawn on the board, and part by part. */
export function WhatChangedSection({ page, number, figure, table }: WhatChangedSectionProps) {
  const { changes, board, release } = page
  if (!changes)
    return (
      <Section number={number} heading="What changed">
        <p className="soft">
          No release of {board.name} comes before {release.version}, so there is none to compare it with.
        </p>
      </Section>
    )
  const { since, revision, sentences, details, parts, moved } = changes
  let tables = table
  return (
    <Section number={number} heading={`What changed since ${since}`} margin={<Margin changes={changes} slug={board.slug} />}>
      {changes.isUnchanged && (
        <p>
          Nothing that Fettle can see changed:{' '}
          {changes.notCompared.length > 0 ? 'what could be compared is' : 'parts, places, copper, holes and outline are'} those of{' '}
          {since}.
        </p>
      )}
      {(revision || sentences.length > 0) && (
        <p>
          {revision && (
            <>
              New board revision,{' '}
              <b>
                {revision.before} to {revision.after}
              </b>
              .{' '}
            </>
          )}
          {sentences.join(' ')}
        </p>
      )}
      {drawings(page).map(({ side, marks, ...picture }, i) => (
        <Figure
          key={side}
          number={figure + i}
          caption={`${side === 'top' ? 'Top side' : 'Bottom side, seen from below'}. ${legend(marks, since)}`}
        >
          <PartMarks
            {...picture}
            marks={marks}
            alt={`${side === 'top' ? 'Top' : 'Bottom'} side of ${board.name} ${release.version} with the parts that changed since ${since}: ${marksInWords(marks)}`}
          />
        </Figure>
      ))}
      {parts.rows.length > 0 && (
        <ChangeTable
          number={tables++}
          caption="Parts changed"
          head="Part"
          rows={parts.rows}
          since={since}
          version={release.version}
        />
      )}
      <More n={parts.more} />
      {moved.rows.length > 0 && (
        <Table
          number={tables++}
          caption="Parts moved, as seen from the top"
          rows={moved.rows}
          rowKey={(row) => `${row.what} ${row.how}`}
          columns={[
            { key: 'what', head: 'Part', cell: (row) => row.what, isRowHead: true },
            { key: 'how', head: 'How', cell: (row) => row.how }
          ]}
        />
      )}
      <More n={moved.more} />
      {details.length > 0 && (
        <ChangeTable
          number={tables++}
          caption="Details that differ"
          head="Detail"
          rows={details}
          since={since}
          version={release.version}
        />
      )}
    </Section>
  )
}

const More = ({ n }: { n: number }) =>
  n > 0 ? <p className="small soft mt-2">And {n} more, not listed here; the files have them all.</p> : null

type ChangeTableProps = {
  number: number
  caption: string
  head: string
  rows: ChangesShown['details']
  since: string
  version: string
}

function ChangeTable({ number, caption, head, rows, since, version }: ChangeTableProps) {
  return (
    <Table
      number={number}
      caption={caption}
      rows={rows}
      rowKey={(row) => `${row.what} ${row.before} ${row.after}`}
      isFolded
      columns={[
        { key: 'what', head, cell: (row) => row.what, isRowHead: true },
        { key: 'before', head: since, cell: (row) => row.before },
        { key: 'after', head: version, cell: (row) => row.after }
      ]}
    />
  )
}

function Margin({ changes, slug }: { changes: ChangesShown; slug: string }) {
  return (
    <>
      {changes.notCompared.map((sentence) => (
        <p key={sentence}>
          <b>Not compared.</b> {sentence}
        </p>
      ))}
      <p>
        <b>Compared with</b> <TextLink href={releasePath(slug, changes.since)}>{changes.since}</TextLink>, the version before. Of
        mask, paste and legend only whether they are there is compared, not what they draw.
      </p>
    </>
  )
}
