import { TwoDrawings } from './figure'

export type RuledRevision = { code: string; from: number }

/** Whether the years tell the revisions apart, so that a drawing says more than the table. */
export const canBeRuled = (revisions: { builtFrom: number | null }[], until: number | null): boolean =>
  revisions.length > 1 &&
  revisions.length <= 12 &&
  revisions.every((r, i) => r.builtFrom !== null && (i === 0 || r.builtFrom > revisions[i - 1]!.builtFrom!)) &&
  (until === null || until >= revisions.at(-1)!.builtFrom!)

export type RevisionRuleProps = { revisions: RuledRevision[]; until: number | null }

/** When each revision was built, as a chain of dimension lines over a rule of years. The table beside it says the same in words. */
export function RevisionRule(props: RevisionRuleProps) {
  return <TwoDrawings wide={<Rule {...props} width={804} />} narrow={<Rule {...props} width={328} />} />
}

function Rule({ revisions, until, width }: RevisionRuleProps & { width: number }) {
  const first = revisions[0]!.from
  const last = Math.max(until ?? 0, revisions.at(-1)!.from) + 1
  const [left, right] = [16, width - 16]
  const pitch = (right - left) / (last - first)
  const at = (year: number) => Math.round((left + (year - first) * pitch) * 10) / 10
  const years = Array.from({ length: last - first }, (_, i) => first + i)
  const step = Math.ceil(38 / pitch)
  const words = revisions.map((r) => `${r.code} from ${r.from}`).join(', ')
  return (
    <svg
      viewBox={`0 0 ${width} 78`}
      width={width}
      height="78"
      className="h-auto max-w-full"
      role="img"
      aria-label={`Years: ${words}`}
    >
      {revisions.map(({ code, from }, i) => {
        const [x0, x1] = [at(from), at(revisions[i + 1]?.from ?? last)]
        const isOpen = i === revisions.length - 1 && until === null
        return (
          <g key={code}>
            <path className="ln" strokeWidth="1" d={`M${x0} 48V20M${x0} 28H${x1}${isOpen ? '' : `M${x1} 48V20`}`} />
            <path d={`M${x0} 28l7 -2.6v5.2z${isOpen ? '' : `M${x1} 28l-7 -2.6v5.2z`}`} fill="var(--color-ink)" />
            <text x={(x0 + x1) / 2} y="15" textAnchor="middle" className="t-b">
              {code}
            </text>
          </g>
        )
      })}
      <path className="ln" strokeWidth="1.5" d={`M${left} 48H${right}`} />
      {years.map((year) => (
        <g key={year}>
          <path className="ln" strokeWidth="1" d={`M${at(year)} 48v6`} />
          {(year - first) % step === 0 && (
            <text x={at(year) + pitch / 2} y="70" textAnchor="middle" className="t-soft">
              {year}
            </text>
          )}
        </g>
      ))}
    </svg>
  )
}
