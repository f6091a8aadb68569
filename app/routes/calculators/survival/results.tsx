import { visibleRuns } from '~/components/chart-geometry'
import { Figure } from '~/components/figure'
import { Section } from '~/components/section'
import { SurvivalChart } from '~/components/survival-chart'
import { Table } from '~/components/table'
import { pText, tooFew } from '~/domain/reliability/reliability-words'
import type { CalculatorFigures, CalculatorGroup } from '~/domain/survival/calculator-figures'
import { confidenceText, timeText, type Limited } from '~/domain/survival/calculator-words'
import { CausesResult } from './causes-result'
import { chartName } from './chart-name'
import { StepsResult } from './steps-result'
import { SupportResult } from './support-result'
import { TakeAway } from './take-away'

const limited = (value: Limited | null) => {
  if (value === null || value.estimate === null) return 'not reached'
  const end = (limit: number | null) => (limit === null ? 'open' : timeText(limit))
  const { estimate, lower, upper } = value
  return lower === null && upper === null ? timeText(estimate) : `${timeText(estimate)} (${end(lower)} to ${end(upper)})`
}

/** How many numbered sections `Results` prints; the form after them goes on counting. */
export const sectionCount = ({ groups, method }: CalculatorFigures): number =>
  3 + (groups.length > 1 ? 1 : 0) + (groups.some((g) => g.causes.length > 0) ? 1 : 0) + (method === 'turnbull' ? 1 : 0)

/** Curve, figures, tests, causes, steps, and the answer to take away. */
export function Results({ figures }: { figures: CalculatorFigures }) {
  const { groups, method } = figures
  let section = 1
  return (
    <>
      <CurveResult figures={figures} />
      {groups.length > 1 && <Difference number={++section} figures={figures} />}
      {groups.some((g) => g.causes.length > 0) && <CausesResult number={++section} figures={figures} />}
      {method === 'turnbull' && <SupportResult number={++section} figures={figures} />}
      <StepsResult number={++section} figures={figures} />
      <TakeAway number={++section} figures={figures} />
    </>
  )
}

function CurveResult({ figures }: { figures: CalculatorFigures }) {
  const { groups, options, readAt, method } = figures
  const drawn = groups.flatMap((g, i) => (g.points === null ? [] : [{ name: chartName(groups, i), n: g.n, points: g.points }]))
  const most = Math.max(...drawn.map((g) => g.n))
  const marked = drawn.findIndex((g) => g.n === most)
  const sure = confidenceText(options.confidence)
  const isDrawn = drawn.some((g) => visibleRuns(g.points).length > 0)
  return (
    <Section number={1} heading="Share still working">
      {isDrawn ? (
        <Figure number={1} caption={curveCaption(figures, drawn.length)}>
          <SurvivalChart
            series={drawn.map(({ name, points }, i) => ({ name, points, marked: i === marked }))}
            unit="day"
            plainUnit={options.timeUnit}
            grain={figures.grain}
            sure={sure}
            reading={readAt === null ? undefined : { days: readAt, words: `${timeText(readAt)} ${options.timeUnit}` }}
          />
        </Figure>
      ) : (
        <p className="max-w-[66ch]">
          No curve is drawn: fewer than {tooFew} units were at risk throughout, and one more or less would move it too far. The
          steps are below.
        </p>
      )}
      <div className="mt-8">
        <Table<CalculatorGroup>
          number={1}
          isFolded
          caption={`In figures, with ${sure} limits; times in ${options.timeUnit}. Open: the limit is not reached within the follow-up.`}
          rows={groups}
          rowKey={(g) => g.name}
          columns={[
            { key: 'group', head: 'Group', isRowHead: true, className: 'break-words', cell: (g) => g.name },
            { key: 'n', head: 'Units', isFigure: true, cell: (g) => g.n },
            { key: 'events', head: 'Failed', isFigure: true, cell: (g) => g.events },
            { key: 'median', head: 'Half have failed by', isFigure: true, cell: (g) => limited(g.median) },
            ...(groups.some((g) => g.mean !== null)
              ? [{ key: 'mean', head: `Mean in work up to ${timeText(options.tau!)}`, isFigure: true, cell: meanText(method) }]
              : []),
            {
              key: 'shape',
              head: 'Weibull shape',
              isFigure: true,
              cell: (g) =>
                g.shape === null ? 'no fit' : `${two(g.shape.estimate)} (${two(g.shape.lower)} to ${two(g.shape.upper)})`
            }
          ]}
        />
      </div>
      {figures.shapeSentence !== null && <p className="mt-4 max-w-[66ch]">{figures.shapeSentence}</p>}
    </Section>
  )
}

const two = (value: number) => (value < 1000 ? value.toFixed(2) : timeText(value))

const meanText = (method: CalculatorFigures['method']) => (g: CalculatorGroup) =>
  method === 'turnbull' ? 'not determined' : g.mean?.estimate == null ? 'not followed so far' : limited(g.mean)

function curveCaption({ method, options, groups }: CalculatorFigures, drawn: number): string {
  const sure = confidenceText(options.confidence)
  const who =
    drawn < 2
      ? `With its ${sure} band`
      : `The group with the most units carries its ${sure} band${groups.length > drawn ? `; the ${drawn} largest of ${groups.length} groups are drawn` : ''}`
  const kind =
    method === 'turnbull'
      ? `By Turnbull, for failures known only between two times. ${who}, by resampling. Where the data do not say when within an interval the share falls, it is not determined: a hatched box, a thin slant on lines without a band.`
      : `By Kaplan and Meier. ${who}; ticks are units that left still working.`
  return `${kind} Thin and faint under 10 at risk, not drawn under ${tooFew}.`
}

function Difference({ number, figures: { logRank, method, groups } }: { number: number; figures: CalculatorFigures }) {
  return (
    <Section number={number} heading="Do the groups differ?">
      {logRank === null ? (
        <p className="max-w-[66ch]">
          {method === 'turnbull'
            ? 'No test is made: the log-rank test needs times of failure, and here some are known only between two times.'
            : 'No test can be made: too little failed while more than one group was at risk.'}
        </p>
      ) : (
        <>
          <p className="max-w-[66ch]">
            Log-rank test of {groups.length} groups: <b>{pText(logRank.p)}</b> (chi-square {logRank.chiSquare.toFixed(2)},{' '}
            {logRank.degreesOfFreedom} {logRank.degreesOfFreedom === 1 ? 'degree' : 'degrees'} of freedom). That is how often a
            difference at least as large would come up if the groups were alike.
          </p>
          <p className="mt-3 max-w-[66ch]">
            What it cannot tell: how large the difference is, what made it, or
            {groups.length > 2 ? ' which groups differ, or' : ''} that groups are alike when <i>p</i> is large. Curves that cross
            can differ and still give a large <i>p</i>.
          </p>
        </>
      )}
    </Section>
  )
}
