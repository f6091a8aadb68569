import { Pager } from '~/components/pager'
import { RatioAxisCell, RatioCell } from '~/components/ratio-bar'
import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { TextLink } from '~/components/text-link'
import { flaggedHeading, flaggedSentence, unwatchedText } from '~/domain/reliability/batch-words'
import type { BatchFigures } from '~/domain/reliability/figures.types'
import { Warning } from '~/components/warning'
import { CsvLink, GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'
import { batchesPageSize, type ShownFigures } from './page-figures'

type Props = SectionProps & { hrefOf: (batch: string) => string | null }

/** Each batch's board failures beside what its release's other batches let expect. */
export function BatchesSection({ here, shown, sections, tables, hrefOf }: Props) {
  const { batches, query } = shown
  const { rows, page, total, unlisted } = batches!
  const scale = scaleOf(rows)
  const hasBar = rows.some((row) => row.watch !== null)
  return (
    <Section
      number={sections.batches!}
      id="batches"
      heading="Batch by batch"
      margin={
        <>
          <p>
            <b>Expected</b> are the board failures that there would be had the batch failed like its release’s other batches. One
            is flagged when the whole interval lies above 1. <GuideLink to="worked-examples#batch">Worked by hand</GuideLink>
          </p>
          <p>
            The expected number is itself uncertain where the other batches are few: a flag is a question to look into. Not
            flagged is not proved sound: with few units, only a very bad batch stands out.
          </p>
        </>
      }
    >
      <div>
        <Table<BatchFigures>
          number={tables.batches!}
          className="ivt"
          caption="Board failures, unexplained ones with them, as many times as expected, with 95 % interval, on a scale of ratios."
          rows={rows}
          rowKey={(row) => row.batch}
          columns={[
            { key: 'batch', head: 'Batch', isRowHead: true, cell: (row) => <BatchHead row={row} href={hrefOf(row.batch)} /> },
            { key: 'made', head: 'Made', isFigure: true, only: 'wide', cell: (row) => row.quantity },
            { key: 'n', head: 'Followed', isFigure: true, only: 'wide', cell: (row) => row.n },
            { key: 'failed', head: 'Failed', isFigure: true, cell: (row) => row.observed },
            { key: 'expected', head: 'Expected', isFigure: true, cell: ({ watch }) => watch?.expected.toFixed(1) ?? '–' },
            {
              key: 'ratio',
              head: 'As many times as expected',
              className: 'iv',
              cell: (row) => <Ratio row={row} scale={scale} />
            }
          ]}
          after={
            hasBar && (
              <tr className="ax" aria-hidden="true">
                <td />
                <td className="w" />
                <td className="w" />
                <td />
                <td />
                <td className="iv">
                  <RatioAxisCell {...scale} />
                </td>
              </tr>
            )
          }
        />
        <Pager
          page={page}
          pageSize={batchesPageSize}
          total={total}
          of="batches"
          hrefOf={(at) => `${here}?${query}&batches=${at}#batches`}
        />
        {unlisted > 0 && <p className="small soft">{unlisted} older batches are not listed; choose a release or a batch.</p>}
        <CsvLink here={here} query={query} table="batches" />
      </div>
    </Section>
  )
}

function Ratio({ row: { watch, observed, others }, scale }: { row: BatchFigures; scale: { from: number; to: number } }) {
  if (watch === null) return <span className="soft">{unwatchedText({ others })}</span>
  return (
    <>
      <RatioCell {...watch} {...scale} />
      {watch.observed < observed && (
        <small className="soft block">
          {watch.observed} of them up to day {watch.comparedTo}, as far as the others were followed
        </small>
      )}
    </>
  )
}

function BatchHead({ row, href }: { row: BatchFigures; href: string | null }) {
  return (
    <>
      {href === null ? <span className="nw">{row.code}</span> : <TextLink href={href}>{row.code}</TextLink>}
      <small className="soft block">{row.version}</small>
      <small className="soft on-n block">
        {row.n} of {row.quantity}
      </small>
    </>
  )
}

/** A round scale around 1 that holds the ratios. */
function scaleOf(rows: readonly BatchFigures[]): { from: number; to: number } {
  const most = Math.max(1, ...rows.flatMap(({ watch }) => (watch && watch.ratio > 0 ? [watch.ratio, 1 / watch.ratio] : [])))
  const to = most <= 8 ? 10 : most <= 80 ? 100 : 1000
  return { from: 1 / to, to }
}

/** Near the top: a batch that stands out. */
export function FlaggedBatches({ flagged, hrefOf }: { flagged: ShownFigures['flagged']; hrefOf: Props['hrefOf'] }) {
  if (flagged.length === 0) return null
  return (
    <Warning severity="caution" heading={flaggedHeading(flagged)}>
      <ul>
        {flagged.map((batch) => {
          const href = hrefOf(batch.batch)
          return (
            <li key={batch.batch}>
              {flaggedSentence(batch)} {href !== null && <TextLink href={href}>How this batch lasts</TextLink>}
            </li>
          )
        })}
      </ul>
      <p>
        <a href="#batches">Batch by batch</a>
      </p>
    </Warning>
  )
}
