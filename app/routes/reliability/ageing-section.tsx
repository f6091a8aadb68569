import { Section } from '~/components/section'
import { Table } from '~/components/table'
import { ageingPattern, ageingSentence, hasEnough, patternWords, shapeInterval } from '~/domain/reliability/ageing-words'
import { CsvLink, GuideLink } from './csv-link'
import type { SectionProps } from './curves-section'
import type { ShownShape } from './page-figures'

/** Whether failures come early or with wear: in words only where the interval of the shape excludes 1. */
export function AgeingSection({ here, shown, sections, tables }: SectionProps) {
  const { all, shapes, query } = shown
  return (
    <Section
      number={sections.ageing!}
      id="ageing"
      heading="Early failures or wear?"
      margin={
        <p>
          <b>A Weibull curve</b> fitted to the units that outlasted the day of fitting. Its shape below 1 means early failures,
          above 1 wear. <GuideLink to="worked-examples#shape">Worked by hand</GuideLink>
        </p>
      }
    >
      <p>{ageingSentence(all.shape)}</p>
      {tables.ageing !== null && (
        <div>
          <Table<ShownShape>
            number={tables.ageing}
            caption={`Shape of the curve, with 95\u00a0% interval, and the day by which one in ten of those that outlasted the day of fitting would have failed if failures kept to it.`}
            rows={shapes}
            rowKey={(row) => row.group}
            columns={[
              { key: 'group', head: 'Units', isRowHead: true, cell: (row) => <span className="nw">{row.group}</span> },
              { key: 'failures', head: 'Failures', isFigure: true, cell: ({ shape }) => shape.failures },
              {
                key: 'shape',
                head: 'Shape',
                isFigure: true,
                cell: ({ shape }) =>
                  hasEnough(shape) && (
                    <>
                      {shape.estimate.toFixed(2)} <small className="on-n soft">{shapeInterval(shape)}</small>
                    </>
                  )
              },
              {
                key: 'interval',
                head: '95 % interval',
                isFigure: true,
                only: 'wide',
                cell: ({ shape }) => hasEnough(shape) && shapeInterval(shape)
              },
              {
                key: 'tenth',
                head: 'One in ten by day',
                isFigure: true,
                only: 'wide',
                cell: ({ shape }) => hasEnough(shape) && tenthText(shape)
              },
              { key: 'words', head: 'Failures grow', className: 'cs', cell: ({ shape }) => patternOf(shape) }
            ]}
          />
          <CsvLink here={here} query={query} table="shape" />
        </div>
      )}
    </Section>
  )
}

const tenthText = ({ b10 }: ShownShape['shape']) =>
  `${Math.round(b10.estimate)} (${Math.floor(b10.lower)} to ${Math.ceil(b10.upper)})`

function patternOf(shape: ShownShape['shape']) {
  const pattern = ageingPattern(shape)
  return pattern === null ? (
    <span className="soft">{hasEnough(shape) ? 'not to be told' : 'too few to tell'}</span>
  ) : (
    patternWords[pattern]
  )
}
