import type { BundleReading } from './bundle-reading.types'
import { growBox } from './geometry'
import { listed } from './finding'
import { nameKey, type NamedPads } from './pad-names'
import { judgePlaces, type PlacesVerdict } from './pad-places'

/** Share of the placed parts that the copper must name, so that another naming there alarms nobody. */
const leastKnown = 0.8

/** Names of what is no part to be bought or placed: test points, fiducials, holes, logos, copper jumpers, unnamed ones (common practice, no source). */
const noPart = /^(TP|FID|FD|FM|H|MH|HOLE|MTG|MP|MK|G|LOGO|SYM|NT|JP|SJ|SB|VIA)\d*$|^(TESTPOINT|FIDUCIAL|LOGO|MOUNT)|[*#~]/i

/** What the outer copper layers' attributes say of the parts; null where they name too few of the placed ones to judge by. */
export type CopperNames = {
  has(designator: string): boolean
  /** Components with pads that neither list has. */
  unlisted: string[]
  places: PlacesVerdict
}

/**
 * The bill of materials and the placement against the component names in the outer copper layers' attributes.
 *
 * Source: Gerber Layer Format Specification 2024.05, chapter 5.6 (`.C` component, `.P` pin).
 */
export function readCopperNames(reading: BundleReading): CopperNames | null {
  const { placement, bom } = reading
  if (!placement || placement.parts.length === 0) return null
  const pads = namedPads(reading)
  const placed = new Set([...placement.parts.map((part) => part.designator), ...placement.unreadable].map(nameKey))
  const known = [...placed].filter((key) => pads.has(key))
  if (known.length < placed.size * leastKnown) return null
  const inBom = new Set(bom?.lines.flatMap((line) => line.designators).map(nameKey))
  const unlisted = [...pads]
    .filter(([key]) => !placed.has(key) && !inBom.has(key) && !noPart.test(key))
    .map(([, { name }]) => name)
    .sort((a, b) => a.localeCompare(b, 'en', { numeric: true }))
  const withPads = placement.parts.flatMap((part) => {
    const box = pads.get(nameKey(part.designator))?.box
    return box ? [{ part, box }] : []
  })
  return { has: (name) => pads.has(nameKey(name)), unlisted, places: judgePlaces(withPads, reading.outline?.box ?? null) }
}

/** The pads of all outer layers by name; names without any are left out. */
function namedPads({ files }: BundleReading): Map<string, NamedPads> {
  const all = new Map<string, NamedPads>()
  for (const { names, image } of files) {
    if (!names || image?.problem) continue
    for (const [key, { name, pads, box }] of names.pads) {
      if (pads === 0) continue
      const known = all.get(key)
      if (!known) all.set(key, { name, pads, box: { ...box } })
      else {
        known.pads += pads
        growBox(known.box, box.minX, box.minY)
        growBox(known.box, box.maxX, box.maxY)
      }
    }
  }
  return all
}

/** What the copper says of parts that are in the bill of materials but not placed; ends the sentence that names them. */
export function whyNotPlaced(missing: string[], copper: CopperNames | null): string {
  if (!copper) return ': fitted by hand, or forgotten.'
  const known = missing.filter((name) => copper.has(name))
  const marks = missing.filter((name) => !copper.has(name) && noPart.test(name))
  const unknown = missing.filter((name) => !copper.has(name) && !noPart.test(name))
  const forgotten = `. The copper has pads for ${shortly(known, missing)}: fitted by hand, or forgotten.`
  return [
    known.length > 0 ? forgotten : '.',
    marks.length > 0 &&
      ` By name ${listed(marks)} ${marks.length === 1 ? 'is' : 'are'} no part to be placed: a hole, a mark or print.`,
    unknown.length > 0 && notNamed(unknown, missing, 'bill of materials', copper)
  ]
    .filter((text) => text !== false)
    .join('')
}

/** What the copper says of parts that are placed but not in the bill of materials; follows the sentence that names them. */
export function whyNotInBom(unlisted: string[], copper: CopperNames | null): string {
  if (!copper) return ''
  const unknown = unlisted.filter((name) => !copper.has(name))
  if (unknown.length === 0) return ` The copper has pads for ${shortly(unlisted, unlisted)}.`
  return notNamed(unknown, unlisted, 'placement list', copper)
}

function notNamed(unknown: string[], all: string[], list: string, { unlisted }: CopperNames): string {
  const others = unlisted.length === 0 ? '' : ` It names ${listed(unlisted)}, which neither list has.`
  return ` The copper does not name ${shortly(unknown, all)}: perhaps the ${list} is of another version.${others}`
}

const shortly = (some: string[], all: string[]) => (some.length < all.length ? listed(some) : all.length === 1 ? 'it' : 'them')
