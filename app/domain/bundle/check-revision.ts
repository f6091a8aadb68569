import type { BundleFinding, DeclaredDetails, LayerFingerprint } from './bundle-check.types'
import type { FileReading } from './bundle-reading.types'
import { compareFingerprints, layerKey, layerName, type LayerDifference } from './compare-fingerprints'
import { finding, listed } from './finding'
import type { FindingCode } from './finding-codes'

/** What already says that a layer is there too often or not at all, by what it concerns. */
const absences: Record<LayerFingerprint['function'], readonly FindingCode[]> = {
  copper: ['copper-missing', 'layer-clash', 'layer-gap', 'layer-count'],
  outline: ['outline-missing', 'outline-open', 'layer-clash'],
  drill: ['drill-missing']
}

/**
 * Whether copper, outline and drilled holes are those of what was published of the same board revision: one finding against the newest release
 * that differs. A layer in one and not in the other is a difference, too. Layers and drill files that were found broken are left out, and so
 * are layers of whose absence something else has been found.
 */
export function checkRevision(
  files: readonly FileReading[],
  fingerprints: readonly LayerFingerprint[],
  soFar: readonly BundleFinding[],
  { earlier, boardRevision }: DeclaredDetails
): BundleFinding[] {
  const codes = new Set(soFar.map((f) => f.code))
  const broken = new Set(files.filter((file) => file.isBroken).map((file) => keyOf(file)))
  const isNews = ({ kind, layer }: LayerDifference) =>
    !broken.has(layerKey(layer)) && (kind === 'changed' || !absences[layer.function].some((code) => codes.has(code)))
  for (const { version, fingerprints: published } of earlier ?? []) {
    if (published.length === 0) continue
    const differences = compareFingerprints(published, fingerprints).filter(isNews)
    if (differences.length === 0) continue
    const revision = boardRevision === undefined ? 'the same board revision' : `the same board revision ${boardRevision}`
    const message = `${sentence(differences)} from release ${version} of ${revision}. Copper, holes and outline are what a board revision stands for.`
    const only = differences.length === 1 && differences[0]!.kind !== 'removed' && differences[0]!.layer.function !== 'drill'
    return [
      finding('revision-unchanged', message, {
        file: only ? differences[0]!.file : null,
        expected: `as in ${version}, or a new board revision`,
        found: listed(differences.map(wordsOf))
      })
    ]
  }
  return []
}

function keyOf({ layer }: FileReading): string {
  const fn = layer.function.startsWith('drill') ? 'drill' : layer.function
  return layerKey({ function: fn as LayerFingerprint['function'], side: layer.side, index: layer.index })
}

/** The names of what differs, as the beginning of a sentence: `The outline and copper top differ`. */
export function sentence(differences: readonly LayerDifference[]): string {
  const names = differences.slice(0, 8).map(({ layer }) => layerName(layer))
  if (differences.length > 8) names.push(`${differences.length - 8} more`)
  const text = names.length === 1 ? names[0]! : `${names.slice(0, -1).join(', ')} and ${names.at(-1)!}`
  const isOne = differences.length === 1 && differences[0]!.layer.function !== 'drill'
  return `${text[0]!.toUpperCase()}${text.slice(1)} ${isOne ? 'differs' : 'differ'}`
}

const kinds = { changed: 'other geometry', added: 'not there before', removed: 'gone' }
const wordsOf = ({ kind, layer }: LayerDifference) => `${layerName(layer)}: ${kinds[kind]}`
