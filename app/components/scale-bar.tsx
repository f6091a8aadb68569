import { TwoDrawings } from './figure'

/** A ruler of some millimetres at the drawing's scale, for boards that are compared. */
export function ScaleBar({ scales, millimetres = 20 }: { scales: { wide: number; narrow: number }; millimetres?: number }) {
  return (
    <TwoDrawings
      wide={<Ruler scale={scales.wide} length={millimetres} />}
      narrow={<Ruler scale={scales.narrow} length={millimetres} />}
    />
  )
}

function Ruler({ scale, length }: { scale: number; length: number }) {
  const width = Math.ceil(length * scale + 60)
  return (
    <svg viewBox={`0 0 ${width} 30`} width={width} height="30" role="img" aria-label={`Scale: ${length} mm`}>
      {Array.from({ length: length + 1 }, (_, n) => {
        const x = Math.round((1 + n * scale) * 100) / 100
        const from = n % 10 === 0 ? 5 : n % 5 === 0 ? 10 : 14
        return <path key={n} className="ln" strokeWidth={n % 10 === 0 ? 1.5 : 1} d={`M${x} ${from}V20`} />
      })}
      <path className="ln" strokeWidth="1.5" d={`M1 20H${1 + length * scale}`} />
      <text x={8 + length * scale} y="20">
        {length} mm
      </text>
    </svg>
  )
}
