/** Dimension lines of a technical drawing: thin line between two feet, filled arrowheads, the measure on a gap of paper. */
type Common = { text: string; isSoft?: boolean }

/** About how wide a text of 14 px is, for the gap behind it. */
export const gapFor = (text: string) => Math.round(text.length * 6.5 + 12)

export function DimensionAcross({
  from,
  to,
  y,
  foot,
  text,
  isSoft
}: Common & { from: number; to: number; y: number; foot: number }) {
  const middle = (from + to) / 2
  const gap = gapFor(text)
  const head = y - 7
  return (
    <g>
      <path className="ln" strokeWidth="1" d={`M${from} ${foot}V${head}M${to} ${foot}V${head}M${from} ${y}H${to}`} />
      <path d={`M${from} ${y}l6 -2.6v5.2zM${to} ${y}l-6 -2.6v5.2z`} fill="var(--color-ink)" />
      <rect x={middle - gap / 2} y={y - 9} width={gap} height="18" fill="var(--color-paper)" />
      <text x={middle} y={y + 5} textAnchor="middle" className={isSoft ? 't-soft' : 't-b'}>
        {text}
      </text>
    </g>
  )
}

export function DimensionDown({
  from,
  to,
  x,
  foot,
  text,
  isSoft
}: Common & { from: number; to: number; x: number; foot: number }) {
  const middle = (from + to) / 2
  const gap = gapFor(text)
  const head = x - 6
  return (
    <g>
      <path className="ln" strokeWidth="1" d={`M${foot} ${from}H${head}M${foot} ${to}H${head}M${x} ${from}V${to}`} />
      <path d={`M${x} ${from}l-2.6 6h5.2zM${x} ${to}l-2.6 -6h5.2z`} fill="var(--color-ink)" />
      <g transform={`translate(${x} ${middle}) rotate(-90)`}>
        <rect x={-gap / 2} y="-9" width={gap} height="18" fill="var(--color-paper)" />
        <text textAnchor="middle" y="5" className={isSoft ? 't-soft' : 't-b'}>
          {text}
        </text>
      </g>
    </g>
  )
}

/** Where 0, 0 lies. */
export function OriginCross({ x, y, hasLabel }: { x: number; y: number; hasLabel?: boolean }) {
  const cross = `M${x - 9} ${y}h18M${x} ${y - 9}v18`
  return (
    <g>
      <path className="halo" d={cross} />
      <path className="ln" strokeWidth="1.25" d={cross} />
      <circle cx={x} cy={y} r="3.6" fill="var(--color-paper)" stroke="var(--color-ink)" strokeWidth="1.25" />
      {hasLabel && (
        <text x={x - 28} y={y + 17} textAnchor="end" className="t-soft">
          0, 0
        </text>
      )}
    </g>
  )
}
