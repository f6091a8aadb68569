import { readFileSync } from 'node:fs'
import semver from 'semver'
import { describe, expect, it } from 'vitest'

type Lockfile = { packages: Record<string, { version?: string; integrity?: string; link?: boolean; inBundle?: boolean }> }
const lock = JSON.parse(readFileSync('package-lock.json', 'utf8')) as Lockfile
const manifest = JSON.parse(readFileSync('package.json', 'utf8')) as Record<
  'dependencies' | 'devDependencies',
  Record<string, string>
>

/**
 * The lowest version of each package that has no known hole which matters here, wherever in the tree it lies. The registry's audit cannot be
 * asked everywhere, so the table is kept by hand: a new advisory is a new line. `below` bounds a floor to one major line.
 */
const floors: { name: string; floor: string; below?: string; why: string }[] = [
  { name: 'sanitize-html', floor: '2.17.4', why: 'earlier ones let markup through' },
  {
    name: 'react-router',
    floor: '7.12.0',
    why: 'cross-site requests to actions, redirects to script addresses (2026-01 advisories)'
  },
  { name: '@react-router/node', floor: '7.9.4', why: 'path traversal in file session storage (CVE-2025-61686)' },
  { name: 'express', floor: '5.0.0', why: 'markup in redirects (CVE-2024-43796)' },
  { name: 'vite', floor: '7.1.11', below: '8.0.0', why: 'development server gave files away (CVE-2025-62522 and earlier)' },
  { name: 'esbuild', floor: '0.25.0', why: 'development server answered any site (GHSA-67mh-4wv8-2f99)' },
  { name: 'jszip', floor: '3.8.0', why: 'unsafe names on loading (CVE-2022-48285)' },
  { name: 'marked', floor: '4.0.10', why: 'expressions of unbounded time (CVE-2022-21680, CVE-2022-21681)' },
  { name: 'path-to-regexp', floor: '8.0.0', below: '9.0.0', why: 'expressions of unbounded time (CVE-2024-45296)' },
  { name: 'cookie', floor: '0.7.0', why: 'names and paths outside the grammar (CVE-2024-47764)' },
  { name: 'send', floor: '0.19.0', why: 'markup in redirects (CVE-2024-43799)' },
  { name: 'serve-static', floor: '1.16.0', why: 'markup in redirects (CVE-2024-43800)' },
  { name: 'body-parser', floor: '1.20.3', why: 'denial of service by url-encoded bodies (CVE-2024-45590)' },
  { name: 'qs', floor: '6.14.1', why: 'limits that brackets went round (CVE-2025-15284), prototype pollution (CVE-2022-24999)' },
  { name: 'semver', floor: '5.7.2', why: 'expressions of unbounded time (CVE-2022-25883)' },
  { name: 'postcss', floor: '8.4.31', why: 'line returns in comments (CVE-2023-44270)' },
  { name: 'nanoid', floor: '3.3.8', why: 'predictable results for fractions (CVE-2024-55565)' },
  { name: 'fast-xml-parser', floor: '4.4.1', why: 'expressions of unbounded time (CVE-2024-41818)' },
  { name: 'xmldom', floor: '99.0.0', why: 'abandoned with open holes (CVE-2022-39353): must not come in' },
  { name: 'on-headers', floor: '1.1.0', why: 'header manipulation (CVE-2025-7339)' },
  { name: 'brace-expansion', floor: '1.1.12', why: 'expressions of unbounded time (CVE-2025-5889)' },
  { name: 'js-yaml', floor: '3.14.2', why: 'prototype pollution (CVE-2025-64718)' },
  { name: 'glob', floor: '10.5.0', why: 'command injection by its command line (CVE-2025-64756)' }
]

const installed = Object.entries(lock.packages).filter(([path]) => path !== '')
const copiesOf = (name: string) =>
  installed.filter(([path]) => path === `node_modules/${name}` || path.endsWith(`/node_modules/${name}`))

describe('the lockfile', () => {
  it('holds no package below its security floor', () => {
    const low = floors.flatMap(({ name, floor, below, why }) =>
      copiesOf(name)
        .filter(([, entry]) => semver.lt(entry.version!, floor) || (below !== undefined && semver.gte(entry.version!, below)))
        .map(([path, entry]) => `${path} ${entry.version}, at least ${floor}: ${why}`)
    )
    expect(low).toEqual([])
  })

  it('holds the packages the table is kept for', () => {
    for (const name of ['sanitize-html', 'react-router', 'express', 'jszip', 'marked', 'vite'])
      expect(copiesOf(name), name).not.toEqual([])
  })

  it('says the checksum of everything that is downloaded', () => {
    const without = installed.filter(([, entry]) => !entry.link && !entry.inBundle && !entry.integrity?.startsWith('sha512-'))
    expect(without.map(([path]) => path)).toEqual([])
  })

  it('agrees with the exact pins of package.json', () => {
    const wrong = Object.entries({ ...manifest.dependencies, ...manifest.devDependencies }).filter(
      ([name, range]) => semver.valid(range) !== range || lock.packages[`node_modules/${name}`]?.version !== range
    )
    expect(wrong).toEqual([])
  })
})
