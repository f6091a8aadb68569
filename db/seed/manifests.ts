import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import type { Day } from '~/lib/dates'
import { demoReleases } from './releases'

/** What the seed takes of a bundle's manifest; lengths in mm, copper in µm. */
export type Manifest = {
  board: string
  version: string
  boardRevision: string
  date: Day
  bundle: { file: string; bytes: number; sha256: string }
  declared: {
    copperLayers: number
    thicknessMm: number
    copperUm: number
    finish: string
    solderMask: string
    legend: string
    stencil: 'none' | 'top' | 'bottom' | 'both'
  }
}

const path = (name: string) => fileURLToPath(new URL(name, import.meta.url))

/** The manifests of the demo's releases, in the order of `demoReleases`. */
export const readManifests = (): Manifest[] =>
  demoReleases.map(
    ({ board, version }) => JSON.parse(readFileSync(path(`manifests/${board}-${version}.json`), 'utf8')) as Manifest
  )

/** The file of a bundle on disk, and the name it goes by. */
export const bundlePath = ({ board, version }: Manifest) => path(`bundles/${board}-${version}.zip`)
export const bundleName = ({ board, version }: Manifest) => `${board}-${version}.zip`
