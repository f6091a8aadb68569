import type { BundleFinding } from './bundle-check.types'
import type { BundleReading } from './bundle-reading.types'
import { finding, mm } from './finding'

/** What a release should carry besides its layers: thickness told the same everywhere, design source, licence. */
export function checkRelease({ files, job, declared }: BundleReading): BundleFinding[] {
  const findings: BundleFinding[] = []
  const inJob = job?.thickness ?? null
  const inForm = declared.thicknessMm ?? null
  if (inJob === null && inForm === null) {
    const message = "Neither a job file nor the release form states the board's thickness."
    findings.push(finding('thickness-missing', message, { expected: 'a thickness in mm' }))
  } else if (inJob !== null && inForm !== null && Math.abs(inJob - inForm) > 0.005) {
    const file = files.find((f) => f.layer.function === 'job')?.layer.file
    const message = 'The job file states another thickness than the release form.'
    findings.push(
      finding('thickness-conflict', message, { file, expected: `${mm(inForm)} (release form)`, found: `${mm(inJob)} (job file)` })
    )
  }
  const has = (fn: string) => files.some((file) => file.layer.function === fn)
  if (!has('source')) {
    const message = "The board's design source is not in the bundle, so that nobody can change the board."
    findings.push(finding('source-missing', message, { expected: 'design files' }))
  }
  if (!has('licence')) {
    findings.push(
      finding('licence-missing', 'No licence file is in the bundle.', { expected: 'a licence file, for instance LICENSE.txt' })
    )
  }
  return findings
}
