/** One at a time for each key, within this process; first come, first served. */
export class KeyedLock {
  readonly #last = new Map<string, Promise<unknown>>()

  async run<T>(key: string, work: () => Promise<T>): Promise<T> {
    const before = this.#last.get(key)
    const mine = (async () => {
      await before?.catch(() => undefined)
      return work()
    })()
    this.#last.set(key, mine)
    try {
      return await mine
    } finally {
      if (this.#last.get(key) === mine) this.#last.delete(key)
    }
  }
}
