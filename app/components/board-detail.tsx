import { useId } from 'react'
import { Balloon } from './balloons'
import type { BoardPicture } from './board-drawing'

export type BoardDetailProps = BoardPicture & {
  /** The middle of what is shown, in millimetres from 0, 0. */
  x: number
  y: number
  /** How many millimetres are seen across. */
  across?: number
  /** The balloon's number in the large figure. */
  number?: number
}

/** An enlarged detail of the very place, for the margin beside a finding. */
export function BoardDetail({ src, alt, width, height, x, y, across = 9, number }: BoardDetailProps) {
  const clip = useId()
  const scale = 236 / across
  const left = Math.round((118 - x * scale) * 100) / 100
  const top = Math.round((59 - (height - y) * scale) * 100) / 100
  return (
    <svg
      viewBox="0 0 236 118"
      width="236"
      height="118"
      role="img"
      aria-label={`Detail of ${alt}${number ? `, place ${number}` : ''}`}
    >
      <clipPath id={clip}>
        <rect width="236" height="118" />
      </clipPath>
      <g clipPath={`url(#${clip})`}>
        <image href={src} x={left} y={top} width={width * scale} height={height * scale} preserveAspectRatio="none" />
      </g>
      <path className="ln" strokeWidth="1.5" d="M0 117.25H236M0 .75H236" />
      <path className="halo" d="M118 45v9M118 64v9M104 59h9M123 59h9" />
      <path className="ln" strokeWidth="1.5" d="M118 45v9M118 64v9M104 59h9M123 59h9" />
      {number !== undefined && <Balloon number={number} x={18} y={18} />}
    </svg>
  )
}
