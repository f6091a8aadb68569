/** A map of at most `size` entries that forgets the one unused for longest. */
export class LruCache<K, V> {
  readonly #entries = new Map<K, V>()
  constructor(readonly size: number) {}

  get(key: K): V | undefined {
    const value = this.#entries.get(key)
    if (value === undefined) return undefined
    this.#entries.delete(key)
    this.#entries.set(key, value)
    return value
  }

  set(key: K, value: V): void {
    this.#entries.delete(key)
    this.#entries.set(key, value)
    if (this.#entries.size > this.size) this.#entries.delete(this.#entries.keys().next().value as K)
  }

  delete(key: K): void {
    this.#entries.delete(key)
  }
}
