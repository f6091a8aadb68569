import { mustReadVersion, precedenceKey } from './version'

/**
 * The release before a version: among a board's published releases the one with the next lower precedence of SemVer 2.0.0, withdrawn ones
 * and trials included; null when there is none. The version itself may be a draft's.
 */
export function previousOf<R extends { version: string; state: string }>(releases: readonly R[], version: string): R | null {
  const keyOf = (text: string) => precedenceKey(mustReadVersion(text))
  const key = keyOf(version)
  let best: { release: R; key: string } | null = null
  for (const release of releases) {
    if (release.state === 'draft') continue
    const its = keyOf(release.version)
    if (its < key && (best === null || its > best.key)) best = { release, key: its }
  }
  return best?.release ?? null
}
