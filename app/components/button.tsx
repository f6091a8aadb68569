import { useId, type ComponentProps, type ReactNode } from 'react'
import { TextLink, type TextLinkProps } from './text-link'

export type ButtonKind = 'solid' | 'outline' | 'destructive'

/** Destructive is an outline too: what warns is the sentence beside it, not a colour. */
const classOf = (kind: ButtonKind) => (kind === 'solid' ? 'btn' : 'btn alt')

export type ButtonProps = Omit<ComponentProps<'button'>, 'style' | 'className'> & {
  kind?: ButtonKind
  /** Why it cannot be pressed now; disables it. */
  reason?: ReactNode
  /** What will happen; required by good manners on a destructive one. */
  note?: ReactNode
  /** What it is doing just now, "Publishing"; a second press does nothing. */
  busy?: string
}

/** One solid button a section; all others are outlined. */
export function Button({ kind = 'solid', reason, note, busy, children, disabled, type = 'submit', ...rest }: ButtonProps) {
  const id = useId()
  const words = reason ?? note
  return (
    <>
      <button
        {...rest}
        type={type}
        className={classOf(kind)}
        disabled={disabled || reason !== undefined}
        aria-busy={busy ? true : undefined}
        aria-disabled={busy ? true : undefined}
        aria-describedby={words ? id : rest['aria-describedby']}
      >
        {busy ?? children}
      </button>
      {words && (
        <span className="act-note" id={id}>
          {words}
        </span>
      )}
    </>
  )
}

/** A link that is the one thing to do here. */
export function ButtonLink({ kind = 'solid', ...rest }: Omit<TextLinkProps, 'className'> & { kind?: ButtonKind }) {
  return <TextLink {...rest} className={classOf(kind)} />
}

/** A link of its own line, "All bulletins". */
export function GoLink(props: Omit<TextLinkProps, 'className'>) {
  return <TextLink {...props} className="go" />
}

/** Buttons in a row; on a phone one below the other. `isWide` shares the column among them. */
export function Actions({ isWide, children }: { isWide?: boolean; children: ReactNode }) {
  return <div className={isWide ? 'acts wide-acts' : 'acts'}>{children}</div>
}
