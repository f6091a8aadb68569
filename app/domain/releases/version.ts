import semver from 'semver'

/** A version as SemVer 2.0.0 splits it; numbers are safe integers. `text` is the canonical spelling, build metadata included. */
export type Version = {
  text: string
  major: number
  minor: number
  patch: number
  prerelease: (string | number)[]
  build: string[]
}

export type VersionAnswer = { ok: true; version: Version } | { ok: false; message: string }

/** Longest spelling that is taken: it stands in addresses, file names and headings. */
export const maxVersionLength = 64

const fewNumbers = /^(\d+)(?:\.(\d+))?$/

/**
 * Reads a canonical SemVer 2.0.0 version, without a leading `v`. What is refused is answered with what would be right.
 * Source: Semantic Versioning 2.0.0, items 2, 9 and 10.
 */
export function readVersion(text: string): VersionAnswer {
  const no = (message: string): VersionAnswer => ({ ok: false, message })
  if (text.length > maxVersionLength) return no(`A version may have ${maxVersionLength} characters at most.`)
  const bare = text.replace(/^[vV=]\s*/, '')
  if (bare !== text && semver.parse(bare)) return no(`Leave out what stands before the numbers: ${bare}`)
  const short = fewNumbers.exec(text)
  if (short)
    return no(
      short[2] === undefined
        ? `${text} lacks its second and third number. Did you mean ${Number(short[1])}.0.0?`
        : `${text} lacks its third number. Did you mean ${Number(short[1])}.${Number(short[2])}.0?`
    )
  const parsed = semver.parse(text)
  if (!parsed) {
    if (/(^|[.-])0\d+($|[.+-])/.test(text.split('+')[0]!)) return no('A number may not begin with 0: write 1.2.3, not 01.2.3.')
    return no('This is no version by SemVer 2.0.0: three numbers as in 1.4.0, or with a pre-release as in 1.4.0-beta.1.')
  }
  const version: Version = {
    text: parsed.version + (parsed.build.length > 0 ? `+${parsed.build.join('.')}` : ''),
    major: parsed.major,
    minor: parsed.minor,
    patch: parsed.patch,
    prerelease: [...parsed.prerelease],
    build: [...parsed.build]
  }
  return version.text === text ? { ok: true, version } : no(`Write it as ${version.text}`)
}

/** @throws Error for a text that `readVersion` refuses: only for versions that were checked before */
export function mustReadVersion(text: string): Version {
  const answer = readVersion(text)
  if (!answer.ok) throw new Error(`not a version: ${text}`)
  return answer.version
}

const number = (digits: string) => digits.length.toString().padStart(2, '0') + digits

/**
 * A text whose order by bytes (SQLite's BINARY, JavaScript's `<`) is the precedence of SemVer 2.0.0, item 11; build metadata is left
 * out, so that two versions that differ only there have the same key. Numbers carry their length in front; a release sorts after
 * its pre-releases (`~` after `-`); fields are divided by a space, which sorts before every character a field may hold.
 */
export function precedenceKey(version: Version): string {
  const core = [version.major, version.minor, version.patch].map((n) => number(String(n))).join('.')
  if (version.prerelease.length === 0) return `${core}~`
  const fields = version.prerelease.map((field) =>
    typeof field === 'number' || /^\d+$/.test(field) ? `0${number(String(field))}` : `1${field}`
  )
  return `${core}-${fields.join(' ')}`
}

/** Whether the version carries a pre-release, and so is published as a trial. */
export const isTrial = (version: Version): boolean => version.prerelease.length > 0

/** The state that publishing gives to a version. */
export const stateWhenPublished = (version: Version): 'trial' | 'released' => (isTrial(version) ? 'trial' : 'released')

type Ranked = { state: 'draft' | 'trial' | 'released' | 'withdrawn'; precedenceKey: string }

/**
 * The newest of a board's releases: the highest precedence among the released, else among the trials. Drafts and withdrawn ones are never it.
 */
export function newestOf<R extends Ranked>(releases: readonly R[]): R | null {
  for (const state of ['released', 'trial'] as const) {
    let best: R | null = null
    for (const r of releases) if (r.state === state && (best === null || r.precedenceKey > best.precedenceKey)) best = r
    if (best) return best
  }
  return null
}
