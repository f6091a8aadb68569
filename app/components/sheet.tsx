import type { ReactNode } from 'react'
import { Mark } from './signs'
import { TextLink } from './text-link'

/** The six words of the running head. */
export const sheetWords = [
  { word: 'Boards', href: '/' },
  { word: 'Consoles', href: '/consoles' },
  { word: 'What fits?', href: '/fit' },
  { word: 'File a report', href: '/report' },
  { word: 'Guides', href: '/guides' },
  { word: 'My bench', href: '/bench' }
] as const

export type SheetWord = (typeof sheetWords)[number]['word']
export type TrailStep = { label: string; href?: string }
/** Where the account entry leads and what it says: the signed-in name, or "Sign in". */
export type AccountEntry = { label: string; href: string }

export type SheetProps = {
  /** The word of the running head that this page belongs to. */
  current?: SheetWord
  account?: AccountEntry
  /** From the start page down to this one; the last step is this page. */
  trail?: TrailStep[]
  /** First words of the foot: what this sheet is, and as of when. */
  foot?: ReactNode
  /** Says in the foot that everything shown is invented. */
  isDemo?: boolean
  /** A form page: narrower main column, wider margin. */
  isForm?: boolean
  children: ReactNode
}

/** The frame of every page: running head, trail, the sheet itself, foot. Works without scripts. */
export function Sheet({ current, account, trail, foot, isDemo, isForm, children }: SheetProps) {
  const entry = account ?? { label: 'Sign in', href: '/sign-in' }
  return (
    <div className="sheet">
      <a className="skip" href="#main">
        Skip to the sheet
      </a>
      <header className="run">
        <TextLink className="mark" href="/" aria-label="Fettle, start page">
          <Mark />
          Fettle
        </TextLink>
        <nav aria-label="Main">
          {sheetWords.map(({ word, href }) => (
            <TextLink key={word} href={href} aria-current={current === word ? 'page' : undefined}>
              {word}
            </TextLink>
          ))}
          <TextLink className="who" href={entry.href}>
            {entry.label}
          </TextLink>
        </nav>
        <details className="menu">
          <summary>
            <span className="shut">Menu</span>
            <span className="open">Close</span>
          </summary>
          <nav aria-label="Main">
            <ul className="mnu">
              {sheetWords.map(({ word, href }) => (
                <li key={word}>
                  <TextLink href={href} aria-current={current === word ? 'page' : undefined}>
                    {word}
                  </TextLink>
                </li>
              ))}
              <li className="more">
                <TextLink href={entry.href}>{entry.label}</TextLink>
              </li>
            </ul>
          </nav>
        </details>
      </header>
      {trail && trail.length > 0 && <Trail steps={trail} />}
      <main id="main" tabIndex={-1} className={isForm ? 'formal' : undefined}>
        {children}
      </main>
      <footer className="foot">
        {foot && <span>{foot}</span>}
        <TextLink href="/guides/figures">How the figures are made</TextLink>
        <TextLink href="/guides/safety">Safety</TextLink>
        <TextLink href="/guides/api">Data and API</TextLink>
        {isDemo && <span>Everything shown is invented for the demo.</span>}
      </footer>
    </div>
  )
}

export function Trail({ steps }: { steps: TrailStep[] }) {
  return (
    <nav className="trail" aria-label="Trail">
      <ol>
        {steps.map(({ label, href }, i) => (
          <li key={`${i} ${label}`} aria-current={i === steps.length - 1 ? 'page' : undefined}>
            {href ? <TextLink href={href}>{label}</TextLink> : label}
          </li>
        ))}
      </ol>
    </nav>
  )
}
