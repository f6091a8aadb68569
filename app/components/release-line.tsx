import { line, namePlaces, nameRoom, timeScale, type LineRelease, type NamePlace } from './release-line-layout'
import { ReleaseTimeRule } from './release-time-rule'
import { TextLink } from './text-link'

export type ReleaseLineProps = {
  board: string
  releases: LineRelease[]
  /** The version that this page shows. */
  shown?: string
  today: string
}

/** Releases on one time scale with board revisions as dimension lines above; on a phone the line stands upright. */
export function ReleaseLine({ board, releases, shown, today }: ReleaseLineProps) {
  const inTime = [...releases].sort((a, b) => (a.on < b.on ? -1 : a.on > b.on ? 1 : 0))
  if (inTime.length === 0) return null
  return (
    <nav className="rline" aria-label={`Releases of ${board}`}>
      <div className="lies">
        <Lying releases={inTime} shown={shown} today={today} />
      </div>
      <div className="stands">
        <Standing releases={inTime} shown={shown} />
      </div>
    </nav>
  )
}

/** Dot released, dashed ring trial, crossed ring withdrawn; the shown one sits in a heavy ring. */
function Sign({ x, y, state, isShown }: { x: number; y: number; state: LineRelease['state']; isShown: boolean }) {
  const ring = { cx: x, cy: y, fill: 'var(--color-paper)', stroke: 'var(--color-ink)' }
  return (
    <g>
      {isShown && <circle {...ring} r="10" strokeWidth="3" />}
      {state === 'released' && <circle cx={x} cy={y} r="5" fill="var(--color-ink)" />}
      {state === 'trial' && <circle {...ring} r="5.5" strokeWidth="1.75" strokeDasharray="2.6 1.72" />}
      {state === 'withdrawn' && (
        <>
          <circle {...ring} r="5.5" strokeWidth="1.75" />
          <path d={`M${x - 6} ${y - 6}l12 12M${x + 6} ${y - 6}l-12 12`} className="ln" strokeWidth="1.75" />
        </>
      )}
    </g>
  )
}

const stateBefore = (state: LineRelease['state']) => (state === 'released' ? '' : `${state}, `)

function Lying({ releases, shown, today }: Omit<ReleaseLineProps, 'board'>) {
  const at = timeScale(releases[0]!.on, today)
  const places = namePlaces(releases.map((r) => ({ x: at(r.on), room: nameRoom(r.version, stateBefore(r.state) + r.on) })))
  const height = places.some((p) => p?.row === 1) ? 164 : 116
  return (
    <svg viewBox={`0 0 ${line.width} ${height}`} width={line.width} height={height}>
      <ReleaseTimeRule releases={releases} today={today} />
      {releases.map(({ version, on }, i) =>
        places[i]?.row === 1 ? <path key={version} stroke="var(--color-edge)" d={`M${at(on)} ${line.y + 10}V122`} /> : null
      )}
      {releases.map((release, i) => (
        <Entry
          key={release.version}
          release={release}
          x={at(release.on)}
          place={places[i]!}
          isShown={release.version === shown}
        />
      ))}
    </svg>
  )
}

function Entry({ release, x, place, isShown }: { release: LineRelease; x: number; place: NamePlace; isShown: boolean }) {
  const { version, state, on, href } = release
  const y = 90 + 48 * (place?.row ?? 0)
  const textX = place?.anchor === 'end' ? x + 5 : x - 5
  const words = place && (
    <>
      <text x={textX} y={y} textAnchor={place.anchor} className={isShown ? 'lb nm here' : 'lb nm'}>
        {version}
      </text>
      <text x={textX} y={y + 20} textAnchor={place.anchor} className="lb t-soft">
        {stateBefore(state)}
        {on}
      </text>
    </>
  )
  const ruleFrom = place?.anchor === 'end' ? textX - version.length * 8.4 : textX
  if (isShown)
    return (
      <g aria-current="true">
        <Sign x={x} y={line.y} state={state} isShown />
        {words}
        {place && <path className="ln" strokeWidth="3" d={`M${ruleFrom} ${y + 6}h${version.length * 8.4}`} />}
      </g>
    )
  return (
    <a href={href} aria-label={`${version}, ${stateBefore(state)}${on}`}>
      <rect x={place?.anchor === 'end' ? x - 100 : x - 12} y={y - 18} width={place ? 112 : 24} height="44" fill="transparent" />
      <Sign x={x} y={line.y} state={state} isShown={false} />
      {words}
    </a>
  )
}

function Standing({ releases, shown }: { releases: LineRelease[]; shown?: string }) {
  return (
    <ol className="rll">
      {releases.map(({ version, state, on, boardRevision, href }) => (
        <li key={version} aria-current={version === shown ? 'true' : undefined}>
          <svg width="24" height="48" viewBox="0 0 24 48" aria-hidden="true">
            <path className="ln" strokeWidth="1.5" d="M12 0V48" />
            <Sign x={12} y={24} state={state} isShown={version === shown} />
          </svg>
          {version === shown ? <b>{version}</b> : <TextLink href={href}>{version}</TextLink>}
          <span>
            {stateBefore(state)}revision {boardRevision}
          </span>
          <time dateTime={on}>{on}</time>
        </li>
      ))}
    </ol>
  )
}
