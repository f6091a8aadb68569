import { line, revisionStretches, timeScale, yearMarks, type LineRelease } from './release-line-layout'

/** The time scale of the lying release line: months, years, today, and board revisions as dimension lines above. */
export function ReleaseTimeRule({ releases, today }: { releases: LineRelease[]; today: string }) {
  const at = timeScale(releases[0]!.on, today)
  return (
    <g aria-hidden="true">
      <path className="ln" strokeWidth="1.5" d={`M1 ${line.y}H${line.today}M${line.today} ${line.y - 8}v16`} />
      <text x={line.today + 10} y={line.y + 5} className="t-soft">
        {today}
      </text>
      {yearMarks(releases[0]!.on, today).map(({ x, kind, label }) => (
        <g key={x}>
          <path
            stroke={kind === 'year' ? 'var(--color-ink)' : 'var(--color-edge)'}
            strokeWidth={kind === 'year' ? 1.5 : 1}
            d={`M${x} ${line.y}v-${kind === 'year' ? 8 : kind === 'quarter' ? 5 : 3}`}
          />
          {label && (
            <text x={x} y={line.y - 13} textAnchor="middle" className="t-soft">
              {label}
            </text>
          )}
        </g>
      ))}
      {revisionStretches(releases, today).map(({ revision, from, to, isOpen }) => {
        const [x0, x1] = [at(from), at(to)]
        const text = x1 - x0 > 150 ? `Board revision ${revision}` : revision
        const gap = text.length * 7.2 + 10
        return (
          <g key={`${revision} ${from}`}>
            <path className="ln" strokeWidth="1" d={`M${x0} 27V5M${x0} 14H${x1}`} />
            <path d={`M${x0} 14l7 -2.6v5.2z${isOpen ? '' : `M${x1} 14l-7 -2.6v5.2z`}`} fill="var(--color-ink)" />
            {x1 - x0 > gap + 20 && <rect x={(x0 + x1 - gap) / 2} y="4" width={gap} height="20" fill="var(--color-paper)" />}
            <text x={(x0 + x1) / 2} y={x1 - x0 > gap + 20 ? 19 : 8} textAnchor="middle" className="t-b">
              {text}
            </text>
          </g>
        )
      })}
    </g>
  )
}
