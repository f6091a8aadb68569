import { DomainError } from '../../lib/domain-error'

/** Runs at most `width` tasks at once, the others in the order they came; past `depth` waiting ones it refuses. */
export class Queue {
  private running = 0
  private readonly waiting: (() => void)[] = []

  constructor(
    private readonly width: number,
    private readonly depth: number
  ) {}

  /** @throws DomainError `rate-limited` when too many wait; the signal's reason when aborted while waiting */
  async add<T>(task: () => Promise<T>, signal?: AbortSignal): Promise<T> {
    signal?.throwIfAborted()
    if (this.running >= this.width) await this.turn(signal)
    else this.running++
    try {
      return await task()
    } finally {
      const next = this.waiting.shift()
      if (next) next()
      else this.running--
    }
  }

  private turn(signal?: AbortSignal): Promise<void> {
    if (this.waiting.length >= this.depth)
      throw new DomainError('rate-limited', 'Too many bundles are being checked. Try again in a minute.')
    return new Promise((resolve, reject) => {
      const leave = () => {
        const at = this.waiting.indexOf(start)
        if (at >= 0) this.waiting.splice(at, 1)
        reject(signal!.reason as Error)
      }
      const start = () => {
        signal?.removeEventListener('abort', leave)
        resolve()
      }
      signal?.addEventListener('abort', leave, { once: true })
      this.waiting.push(start)
    })
  }
}
