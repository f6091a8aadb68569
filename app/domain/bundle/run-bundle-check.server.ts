import { stat } from 'node:fs/promises'
import { DomainError } from '../../lib/domain-error'
import {
  unknownFacts,
  type BundleCheck,
  type BundlePictures,
  type BundleRecord,
  type CheckStep,
  type DeclaredDetails
} from './bundle-check.types'
import type { ChildMessage, ChildOrder } from './check-child.types'
import { CheckProcesses, type CheckProcess } from './check-processes.server'
import { somePictures, withPart } from './drawn-part'
import { Queue } from './check-queue'
import { finding } from './finding'
import { defaultLimits, type CheckLimits } from './limits'

export type CheckInput = DeclaredDetails & {
  /** A file on disk that nobody writes to while it is checked. */
  path: string
  onProgress?: (step: CheckStep) => void
  signal?: AbortSignal
  /** Gets what a crashed child wrote; for the log, not for people. */
  onCrash?: (detail: string) => void
}

/** The answer, what is kept of the bundle beside it (null where the zip was refused), and the pictures where they could be drawn. */
export type CheckWithPictures = { check: BundleCheck; record: BundleRecord | null; pictures: BundlePictures | null }

/** At most two checks at once; more than fifty waiting are turned away. */
const queue = new Queue(2, 50)
const processes = new CheckProcesses()

/**
 * Checks a bundle in a child process that does nothing else meanwhile and is killed when it exceeds its time; its memory is bounded and its
 * environment empty. A child that is killed or dies gives a `check-cut-off` finding.
 *
 * @throws DomainError `not-found` where the file does not exist, `rate-limited` when too many checks wait
 * @throws the signal's reason when aborted
 */
export async function runBundleCheck(input: CheckInput, limits: Partial<CheckLimits> = {}): Promise<BundleCheck> {
  return (await queue.add(() => runChild(input, { ...defaultLimits, ...limits }, false), input.signal)).check
}

/**
 * The same check, and both sides and every layer drawn where that is possible. A failure to draw never fails the check, nor does drawing
 * take of its time; what was drawn until the time for drawing was up stands.
 */
export function runBundleCheckWithPictures(input: CheckInput, limits: Partial<CheckLimits> = {}): Promise<CheckWithPictures> {
  return queue.add(() => runChild(input, { ...defaultLimits, ...limits }, true), input.signal)
}

async function runChild(input: CheckInput, limits: CheckLimits, withPictures: boolean): Promise<CheckWithPictures> {
  const bytes = await sizeOf(input.path)
  input.signal?.throwIfAborted()
  if (bytes > limits.zipBytes) {
    const details = { expected: `at most ${limits.zipBytes} bytes`, found: `${bytes} bytes` }
    const stop = finding('zip-too-large', 'The zip is larger than a bundle may be.', details)
    return { check: failed(bytes, stop), record: null, pictures: null }
  }
  const { path, declaredLayers, thicknessMm, boardRevision, earlier } = input
  const order = { path, declared: { declaredLayers, thicknessMm, boardRevision, earlier }, limits, withPictures }
  for (;;) {
    const outcome = await follow(processes.take(limits.heapMib), order, bytes, input)
    if (outcome) return outcome
  }
}

/**
 * Waits for the child's answer, its death, the end of its time or the caller's signal, whichever comes first. Null when a process that had been
 * waiting turned out to be dead before it heard the order.
 */
function follow(process: CheckProcess, order: ChildOrder, bytes: number, input: CheckInput): Promise<CheckWithPictures | null> {
  const { child } = process
  return new Promise((resolve, reject) => {
    let check: BundleCheck | null = null
    let record: BundleRecord | null = null
    let pictures: BundlePictures | null = null
    let isLate = false
    let hasHeard = process.checks === 0
    let lastWords = ''
    const kill = () => child.kill('SIGKILL')
    const killLate = () => {
      isLate = true
      kill()
    }
    let timer = setTimeout(killLate, order.limits.wallMs)
    input.signal?.addEventListener('abort', kill, { once: true })
    child.stderr?.on('data', (chunk: Buffer) => (lastWords += chunk.toString().slice(0, Math.max(0, 4000 - lastWords.length))))
    child.on('message', (message: ChildMessage) => {
      hasHeard = true
      if (message.kind === 'step') input.onProgress?.(message.step)
      else if (message.kind === 'checked') {
        ;({ check, record } = message)
        // Drawing has a time of its own: neither takes the other's.
        clearTimeout(timer)
        timer = setTimeout(killLate, order.limits.drawMs)
      } else if (message.kind === 'drawn') pictures = withPart(pictures, message.part)
      else {
        stopWaiting()
        processes.release(process, message.residentBytes)
        if (input.signal?.aborted) reject(input.signal.reason as Error)
        else resolve({ check: check!, record, pictures: somePictures(pictures) })
      }
    })
    const stopWaiting = () => {
      clearTimeout(timer)
      input.signal?.removeEventListener('abort', kill)
    }
    const end = (code: number | null, signal: string | null) => {
      stopWaiting()
      if (input.signal?.aborted) return reject(input.signal.reason as Error)
      if (!hasHeard && !isLate) return resolve(null)
      if (!check || code !== 0) input.onCrash?.(`code ${code}, signal ${signal}: ${lastWords}`)
      resolve({
        check: check ?? failed(bytes, cutOff(isLate, order.limits, signal ?? `exit ${code}`)),
        record,
        pictures: somePictures(pictures)
      })
    }
    child.once('error', (error) => {
      lastWords = error.message
      if (child.pid === undefined) end(null, 'not started')
      else kill()
    })
    child.once('exit', end)
    child.send(order, (error) => {
      // The child died before it heard: `exit` tells.
      if (error) lastWords += error.message
    })
  })
}

function cutOff(isLate: boolean, limits: CheckLimits, how: string) {
  if (isLate) {
    const message = 'The check took too long and was stopped. Something in the zip is far more complex than a board.'
    return finding('check-cut-off', message, { expected: `at most ${limits.wallMs / 1000} s`, found: 'longer' })
  }
  const message = 'The check broke off. Something in the zip takes more memory than a check may use.'
  return finding('check-cut-off', message, { expected: `at most ${limits.heapMib} MiB`, found: how })
}

const failed = (bytes: number, stop: BundleCheck['findings'][number]): BundleCheck => ({
  layers: [],
  facts: { ...unknownFacts(), bytes },
  findings: [stop],
  ok: false
})

async function sizeOf(path: string): Promise<number> {
  const stats = await stat(path).catch(() => null)
  if (!stats?.isFile())
    throw new DomainError('not-found', 'The file does not exist or is no file.', [{ path: 'file', message: 'No such file' }])
  return stats.size
}
