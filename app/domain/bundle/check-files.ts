import type { BundleFinding } from './bundle-check.types'
import type { FileReading } from './bundle-reading.types'
import { finding, listed } from './finding'

const isDrill = (file: FileReading) => file.layer.function.startsWith('drill')

const roleName = (fn: string, side: string | null) => [fn, side].filter(Boolean).join(', ')

/** What is wrong with each layer or drill file by itself. Marks the broken ones. */
export function checkFiles(files: FileReading[]): BundleFinding[] {
  const isBare = hasBareSide(files)
  return files.flatMap((file) => {
    const stop = fileStop(file, isBare)
    if (stop) file.isBroken = true
    return [...(stop ? [stop] : []), ...fileRemarks(file)]
  })
}

/** Whether a copper layer may be without copper: there are no plated holes, whose pads would be on all of them. */
function hasBareSide(files: FileReading[]): boolean {
  const isPlated = (file: FileReading) =>
    (file.holes ?? []).some(
      (hole) => (hole.plating ?? (file.layer.function === 'drill-nonplated' ? 'non-plated' : null)) !== 'non-plated'
    )
  const outer = files.filter((file) => file.layer.function === 'copper' && file.layer.side !== 'inner')
  return (
    outer.some((file) => (file.image?.objects ?? 0) > 0) &&
    !files.some((file) => isDrill(file) && (!file.holes || isPlated(file)))
  )
}

function fileStop(file: FileReading, isBare: boolean): BundleFinding | null {
  const { file: name, function: fn } = file.layer
  const isLayer = isDrill(file) || ['copper', 'soldermask', 'paste', 'legend', 'outline'].includes(fn)
  if (file.kind === 'empty')
    return isLayer
      ? finding('layer-empty', `The file is empty, though it stands for ${fn}.`, { file: name, found: `${file.size} bytes` })
      : null
  const problem = file.image?.problem
  if (problem) {
    const drill = isDrill(file)
    const details = { file: name, found: problem.found }
    if (problem.kind === 'truncated')
      return finding('layer-truncated', `${problem.message} It may have been cut off.`, {
        ...details,
        expected: drill ? 'M30' : 'M02'
      })
    if (problem.kind === 'too-complex') {
      return finding(
        drill ? 'drill-too-complex' : 'layer-too-complex',
        `The file asks for more work than a check does: ${problem.message}.`,
        details
      )
    }
    return finding(drill ? 'drill-unreadable' : 'layer-unreadable', `The file cannot be read: ${problem.message}.`, details)
  }
  if (fn === 'copper' && isBare) return null
  if ((fn === 'copper' || fn === 'outline') && file.image && file.image.objects === 0) {
    return finding('layer-empty', `The file draws nothing, though it stands for ${roleName(fn, file.layer.side)}.`, {
      file: name,
      found: '0 objects'
    })
  }
  return null
}

function fileRemarks(file: FileReading): BundleFinding[] {
  const { file: name, function: fn, side } = file.layer
  const findings: BundleFinding[] = []
  if (file.conflict) {
    const found = roleName(file.conflict.function, file.conflict.side)
    const message = "The file's own attribute and its name disagree on what it is; the attribute is followed."
    findings.push(
      finding('layer-conflict', message, { file: name, expected: `${roleName(fn, side)} (attribute)`, found: `${found} (name)` })
    )
  }
  if (file.isUndecided && (file.kind === 'gerber' || file.kind === 'drill')) {
    findings.push(finding('layer-unknown', 'Neither attribute, name nor content tell what this layer is for.', { file: name }))
  }
  if (!file.image) return findings
  if (file.image.deprecated.length > 0) {
    const found = listed(file.image.deprecated)
    findings.push(
      finding('deprecated-syntax', 'The file uses commands that the Gerber specification deprecates; they were read.', {
        file: name,
        found
      })
    )
  }
  if (file.image.markup !== null) {
    const message = 'An attribute holds markup; it is shown as plain text.'
    findings.push(finding('text-unsafe', message, { file: name, found: file.image.markup }))
  }
  return findings
}
