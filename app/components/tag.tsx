import type { ReactNode } from 'react'

export type ReleaseTagState = 'draft' | 'trial' | 'released' | 'withdrawn'

const day = (at: string | undefined) => (at ? ` ${at}` : '')

export type ReleaseTagProps = {
  board: string
  version: string
  state: ReleaseTagState
  /** The day of the state: published, or withdrawn. */
  on?: string
  boardRevision?: string
  /** Of a withdrawn release: the day it was released. */
  releasedOn?: string
  /** The head of a page (an h1), or small inside one. */
  isHead?: boolean
}

/** What a release is: board, version, state. The word tells the state, then the line does. */
export function ReleaseTag({ board, version, state, on, boardRevision, releasedOn, isHead }: ReleaseTagProps) {
  const name = (
    <>
      {board} <span className={state === 'withdrawn' ? 'vr' : undefined}>{version}</span>
    </>
  )
  return (
    <div className={`tag ${state}${isHead ? ' head' : ''}`}>
      <i className="eye" aria-hidden="true" />
      {isHead ? <h1 className="tn">{name}</h1> : <p className="tn">{name}</p>}
      <p className="ts">
        <span>
          <b>{state}</b>
          {state === 'draft' ? ' yours alone' : day(on)}
        </span>
        {releasedOn && <span>released {releasedOn}</span>}
        {boardRevision && (
          <span>
            board revision <b>{boardRevision}</b>
          </span>
        )}
      </p>
    </div>
  )
}

export type UnitTagProps = {
  /** The text of the label; without one the board is untagged. */
  tag?: string
  what?: ReactNode
  facts?: { label: string; value: ReactNode }[]
  /** The head of the unit's own page. */
  isHead?: boolean
}

/** One physical board, with what is known of it. */
export function UnitTag({ tag, what, facts = [], isHead }: UnitTagProps) {
  const name = tag ?? <span className="soft">no unit tag</span>
  return (
    <div className={`tag ${tag ? 'released' : 'draft'}${isHead ? ' head' : ''}`}>
      <i className="eye" aria-hidden="true" />
      {isHead ? <h1 className="tn">{name}</h1> : <p className="tn">{name}</p>}
      <p className="ts">{tag ? <span>{what}</span> : (what ?? 'an untagged board; it counts all the same')}</p>
      {facts.length > 0 && (
        <dl>
          {facts.map(({ label, value }) => (
            <div key={label}>
              <dt>{label}</dt>
              <dd>{value}</dd>
            </div>
          ))}
        </dl>
      )}
    </div>
  )
}
