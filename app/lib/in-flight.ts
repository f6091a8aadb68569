import { DomainError } from './domain-error'

/** How many may be at the same thing at once, in this process: in all, and for each key. */
export class InFlight {
  readonly #byKey = new Map<string, number>()
  #all = 0

  constructor(
    private readonly perKey: number,
    private readonly inAll: number
  ) {}

  /**
   * Runs the work unless too many are at it; nobody waits.
   * @throws DomainError `rate-limited`
   */
  async run<T>(key: string, work: () => Promise<T>): Promise<T> {
    const mine = this.#byKey.get(key) ?? 0
    if (mine >= this.perKey) throw new DomainError('rate-limited', `At most ${this.perKey} at a time. Wait for one to end.`)
    if (this.#all >= this.inAll) throw new DomainError('rate-limited', 'Too many are at this just now. Try again in a minute.')
    this.#byKey.set(key, mine + 1)
    this.#all++
    try {
      return await work()
    } finally {
      this.#all--
      const left = this.#byKey.get(key)! - 1
      if (left === 0) this.#byKey.delete(key)
      else this.#byKey.set(key, left)
    }
  }
}
