import type { ReactNode } from 'react'

/** Signs are drawn shapes that always stand beside their word; alone they mean nothing and are hidden from readers. */
type SignProps = { size?: number }

const sign = (box: number, size: number, children: ReactNode) => (
  <svg width={size} height={size} viewBox={`0 0 ${box} ${box}`} aria-hidden="true">
    {children}
  </svg>
)

export const StopSign = ({ size = 22 }: SignProps) =>
  sign(
    24,
    size,
    <>
      <path d="M7.5 1.5h9l6 6v9l-6 6h-9l-6-6v-9z" fill="var(--color-oxide)" />
      <path d="M6.5 12h11" stroke="var(--color-on-oxide)" strokeWidth="3.4" />
    </>
  )

export const CautionSign = ({ size = 22 }: SignProps) =>
  sign(
    24,
    size,
    <>
      <path
        d="M12 2.2L23 21.8H1z"
        fill="var(--color-marigold)"
        stroke="var(--color-ink)"
        strokeWidth="1.8"
        strokeLinejoin="round"
      />
      <path d="M12 9v6.2M12 17v2.4" stroke="var(--color-on-marigold)" strokeWidth="2.4" />
    </>
  )

export const NoteSign = ({ size = 22 }: SignProps) =>
  sign(
    24,
    size,
    <>
      <circle cx="12" cy="12" r="9.6" fill="none" stroke="var(--color-petrol)" strokeWidth="2" />
      <path d="M12 10.6v7M12 6.4v2.2" stroke="var(--color-petrol)" strokeWidth="2.4" />
    </>
  )

export const FitsSign = ({ size = 22 }: SignProps) => sign(24, size, <circle cx="12" cy="12" r="9.5" fill="var(--color-ink)" />)

export const WithCareSign = ({ size = 22 }: SignProps) =>
  sign(
    24,
    size,
    <>
      <circle cx="12" cy="12" r="9.25" className="ln" strokeWidth="2" />
      <path d="M12 2.75a9.25 9.25 0 0 0 0 18.5z" fill="var(--color-ink)" />
    </>
  )

/** A dotted ring: untested, or waiting. */
export const DottedSign = ({ size = 22 }: SignProps) =>
  sign(24, size, <circle cx="12" cy="12" r="9.25" className="ln" strokeWidth="2.4" strokeDasharray="2.4 3.41" />)

export const CrossSign = ({ size = 22 }: SignProps) =>
  sign(24, size, <path d="M3.5 3.5l17 17M20.5 3.5l-17 17" className="ln" strokeWidth="3.4" />)

export const TickSign = ({ size = 20 }: SignProps) =>
  sign(18, size, <path d="M2 9.5l5 5L16 3.5" fill="none" stroke="var(--color-petrol)" strokeWidth="2.6" />)

/** A quarter of a ring: going on now. */
export const NowSign = ({ size = 20 }: SignProps) =>
  sign(
    24,
    size,
    <>
      <circle cx="12" cy="12" r="9.5" fill="none" stroke="var(--color-petrol)" strokeWidth="2.4" />
      <path d="M12 12V2.5A9.5 9.5 0 0 1 21.5 12z" fill="var(--color-petrol)" />
    </>
  )

export const ErrorSign = ({ size = 20 }: SignProps) =>
  sign(20, size, <path d="M3 3l14 14M17 3L3 17" stroke="var(--color-oxide)" strokeWidth="3" />)

export const PlusSign = ({ size = 28 }: SignProps) =>
  sign(30, size, <path d="M15 3v24M3 15h24" stroke="currentColor" strokeWidth="2.5" />)

export const Mark = () => (
  <svg width="30" height="24" viewBox="0 0 30 24" aria-hidden="true">
    <circle cx="4" cy="20" r="3.2" fill="var(--color-petrol)" />
    <path d="M5.5 18.2L15.5 7.5H30" fill="none" stroke="var(--color-petrol)" strokeWidth="2.4" />
  </svg>
)
