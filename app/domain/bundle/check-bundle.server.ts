import { createHash } from 'node:crypto'
import {
  unknownFacts,
  type BundleCheck,
  type BundleFinding,
  type BundleRecord,
  type CheckStep,
  type DeclaredDetails
} from './bundle-check.types'
import type { BundleReading, FileReading } from './bundle-reading.types'
import { bundleRecord } from './bundle-record'
import { checkAlignment } from './check-alignment'
import { checkFiles } from './check-files'
import { checkLists } from './check-lists'
import { checkPresence } from './check-presence'
import { checkRelease } from './check-release'
import { checkRevision } from './check-revision'
import { finding, listed, mm } from './finding'
import { fingerprintsOf } from './layer-fingerprint'
import { inStackOrder } from './layer-order'
import { defaultLimits, type CheckLimits } from './limits'
import { measureFacts } from './measure-facts'
import { readBundle } from './read-bundle.server'
import { tellLayers, type BundleSource } from './tell-layers'
import { unpackZip } from './unpack-zip.server'

/** The answer, what is kept of the bundle, and what was read; all but the answer null where the zip was refused or is no bundle. */
export type CheckedBundle = {
  check: BundleCheck
  record: BundleRecord | null
  reading: BundleReading | null
  source: BundleSource | null
}

/**
 * The bundle check on bytes in memory, without limits of time: METHODS section 3. Runs in a child process; see `run-bundle-check`.
 *
 * Nothing is thrown for what the zip holds. `reading` and `source` are for drawing the pictures afterwards.
 */
export async function checkBundle(
  bytes: Uint8Array,
  declared: DeclaredDetails = {},
  limits: CheckLimits = defaultLimits,
  onStep: (step: CheckStep) => void = () => {}
): Promise<CheckedBundle> {
  onStep('read-zip')
  const facts = { ...unknownFacts(), bytes: bytes.length, sha256: createHash('sha256').update(bytes).digest('hex') }
  const zip = await unpackZip(bytes, limits)
  if (zip.entries.length === 0)
    return { check: answer([], facts, zip.findings, limits), record: null, reading: null, source: null }

  onStep('tell-layers')
  const files = await tellLayers(zip, limits)
  const findings: BundleFinding[] = [...zip.findings]
  findings.push(...nestedArchives(files))
  const { reading, findings: fromReading } = await readBundle(zip, files, declared, limits, onStep)
  findings.push(...checkFiles(files))
  const presence = checkPresence(reading)
  const outline = checkOutline(reading)
  const isHopeless = presence.some((f) => f.code === 'copper-missing' && f.found === 'none')
  if (isHopeless) {
    const rest = onlyDefect([...findings, ...presence, ...outline, ...fromReading])
    return {
      check: answer(
        files.map((f) => f.layer),
        { ...measureFacts(reading), ...sums(facts, files.length) },
        rest,
        limits
      ),
      record: null,
      reading: null,
      source: null
    }
  }
  const alignment = checkAlignment(reading)
  const foreign = foreignCopper(files, alignment)
  findings.push(...(foreign.size > 0 ? checkPresence(reading, foreign) : presence), ...outline, ...fromReading)
  findings.push(...alignment, ...checkLists(reading), ...checkRelease(reading))
  const fingerprints = fingerprintsOf(reading)
  findings.push(...checkRevision(files, fingerprints, findings, declared))
  const all = { ...measureFacts(reading), ...sums(facts, files.length) }
  return {
    check: answer(
      files.map((f) => f.layer),
      all,
      findings,
      limits
    ),
    record: bundleRecord(reading, fingerprints),
    reading,
    source: zip
  }
}

/** Copper layers of another board, whose own word about their place in this one is not to be counted with. */
function foreignCopper(files: FileReading[], alignment: BundleFinding[]): Set<FileReading> {
  const misaligned = new Set(alignment.filter((f) => f.code === 'layer-misaligned').map((f) => f.file))
  return new Set(files.filter(({ layer }) => layer.function === 'copper' && misaligned.has(layer.file)))
}

/** Archives inside the zip, all in one finding; those in place of a list or among papers are told there. */
function nestedArchives(files: FileReading[]): BundleFinding[] {
  const elsewhere = ['bom', 'placement', 'document', 'source']
  const names = files.filter((f) => f.kind === 'archive' && !elsewhere.includes(f.layer.function)).map((f) => f.layer.file)
  if (names.length === 0) return []
  const message =
    names.length === 1
      ? 'There is an archive inside the zip; it is not read.'
      : 'There are archives inside the zip; they are not read.'
  return [finding('zip-nested', message, { file: names[0]!, expected: 'the files themselves', found: listed(names) })]
}

/**
 * What is said of a zip without any layer: that is one defect, not six. Where the files may well lie in an archive inside, that archive is
 * the defect, and it stops the release.
 */
function onlyDefect(findings: BundleFinding[]): BundleFinding[] {
  const rest = findings.filter((f) => !['bom-missing', 'placement-missing'].includes(f.code))
  if (!rest.some((f) => f.code === 'zip-nested')) return rest
  const message = 'The zip holds no layers itself: they may lie in the archive inside it, which is not read.'
  return rest
    .filter((f) => f.code !== 'copper-missing')
    .map((f) => (f.code === 'zip-nested' ? { ...f, severity: 'stop' as const, message } : f))
}

const sums = (facts: { bytes: number; sha256: string }, files: number) => ({ files, bytes: facts.bytes, sha256: facts.sha256 })

function checkOutline({ outline, outlineFile }: BundleReading): BundleFinding[] {
  if (!outline?.open || !outlineFile || outlineFile.isBroken) return []
  outlineFile.isBroken = true
  const { gap, x, y } = outline.open
  const message = `The board's outline does not close; an end lies at ${mm(x)}, ${mm(y)}.`
  return [
    finding('outline-open', message, {
      file: outlineFile.layer.file,
      expected: 'a closed contour',
      found: gap === null ? null : `a gap of ${mm(gap)}`,
      place: outlineFile.image && outlineFile.image.objects > 0 ? { x, y, side: null } : null
    })
  ]
}

const rank = { stop: 0, caution: 1, note: 2 }

/** The answer: findings by severity, at most so many of one code. */
function answer(
  layers: BundleCheck['layers'],
  facts: BundleCheck['facts'],
  findings: BundleFinding[],
  limits: CheckLimits
): BundleCheck {
  const counts = new Map<string, number>()
  for (const { code } of findings) counts.set(code, (counts.get(code) ?? 0) + 1)
  const shown = new Map<string, number>()
  const kept = findings
    .filter(({ code }) => {
      shown.set(code, (shown.get(code) ?? 0) + 1)
      return shown.get(code)! <= limits.findingsPerCode
    })
    .map((f, i, all) => {
      const more = counts.get(f.code)! - limits.findingsPerCode
      const isLast = all.findLastIndex((other) => other.code === f.code) === i
      return more > 0 && isLast ? { ...f, message: `${f.message} There are ${more} more of this kind.` } : f
    })
  kept.sort((a, b) => rank[a.severity] - rank[b.severity])
  return { layers: inStackOrder(layers), facts, findings: kept, ok: !kept.some((f) => f.severity === 'stop') }
}
