import { TwoDrawings } from './figure'

export type StackLayer = { name: string; note: string }

export type CopperStackProps = {
  /** Copper layers from the top down. */
  layers: StackLayer[]
  /** Of the whole board; null when nobody declared it. */
  thicknessMm: number | null
}

const copper = '#b98d3c'
const maskHeight = 7
const coreHeight = 44

/** A cross-section: which copper layer lies where between the two masks. Not to scale: neither copper nor core could be seen. */
export function CopperStack(props: CopperStackProps) {
  return <TwoDrawings wide={<Stack {...props} width={382} bar={150} />} narrow={<Stack {...props} width={328} bar={118} />} />
}

function Stack({ layers, thicknessMm, width, bar }: CopperStackProps & { width: number; bar: number }) {
  const { coppers, gaps, bottom } = rowsOf(layers.length)
  const core = gaps.find(({ height }) => height === coreHeight)
  const height = bottom + maskHeight + 1
  return (
    <svg
      viewBox={`0 0 ${width} ${height}`}
      width={width}
      height={height}
      role="img"
      aria-label={`Cross-section of ${layers.length === 1 ? 'the copper layer' : `the ${layers.length} copper layers`}: ${layers.map(({ name }) => name).join(', ')} from the top down`}
    >
      <rect x="1" y="1" width={bar} height={maskHeight} fill="var(--color-board-mask)" />
      {gaps.map(({ y, height }) => (
        <g key={y}>
          <rect x="1" y={y} width={bar} height={height} fill="var(--color-wash)" stroke="var(--color-edge)" strokeWidth="1" />
          <path d={hatch(bar, y + height)} stroke="var(--color-edge)" strokeWidth=".7" opacity=".6" />
        </g>
      ))}
      {coppers.map(({ y, height }, i) => (
        <g key={y}>
          <rect x="1" y={y} width={bar} height={height} fill={copper} />
          <Legend bar={bar} y={y + height / 2} {...layers[i]!} />
        </g>
      ))}
      <rect x="1" y={bottom} width={bar} height={maskHeight} fill="var(--color-board-mask)" />
      {core && thicknessMm !== null && (
        <Legend bar={bar} y={core.y + core.height / 2} name="Board" note={`${thicknessMm} mm in all`} />
      )}
    </svg>
  )
}

/** Heights of the drawing: outer copper thicker, the middle of the board the widest; many layers stand closer. */
function rowsOf(count: number) {
  const gap = count > 8 ? 12 : 22
  const coppers: { y: number; height: number }[] = []
  const gaps: { y: number; height: number }[] = []
  let y = 1 + maskHeight
  for (let i = 0; i < count; i++) {
    const thick = i === 0 || i === count - 1 ? 13 : 8
    coppers.push({ y, height: thick })
    y += thick
    if (i === count - 1 && count > 1) break
    const isCore = count === 1 || i === Math.floor((count - 2) / 2)
    gaps.push({ y, height: isCore ? coreHeight : gap })
    y += isCore ? coreHeight : gap
  }
  return { coppers, gaps, bottom: y }
}

const hatch = (bar: number, bottom: number) =>
  Array.from({ length: Math.floor(bar / 10) }, (_, i) => `M${1 + i * 10} ${bottom}l10 -10`).join('')

function Legend({ bar, y, name, note }: StackLayer & { bar: number; y: number }) {
  return (
    <g>
      <path className="ln" strokeWidth="1" d={`M${bar + 1} ${y}h24`} />
      <circle cx={bar + 1} cy={y} r="2.4" fill="var(--color-ink)" />
      <text x={bar + 39} y={y + 5}>
        <tspan className="t-b">{name}</tspan>
        <tspan dx="8" className="t-soft">
          {note}
        </tspan>
      </text>
    </g>
  )
}
