import 'server-only'

/**
 * Slows the guessing of one account's password: after some misses each further one doubles the wait. In memory, because a
 * restart costs a guesser more time than it gains, and bounded in size.
 */
const FREE_MISSES = 10
const LONGEST_WAIT_MS = 60_000
const FORGET_MS = 15 * 60_000
const MOST_KEYS = 10_000

interface Misses {
  count: number
  lastMs: number
}

export class SlowDown {
  readonly #misses = new Map<string, Misses>()

  /** Milliseconds still to wait before the next try counts. */
  waitMs(key: string, nowMs: number): number {
    const misses = this.#misses.get(key)
    if (!misses || misses.count < FREE_MISSES) return 0
    const wait = Math.min(LONGEST_WAIT_MS, 1000 * 2 ** (misses.count - FREE_MISSES))
    return Math.max(0, misses.lastMs + wait - nowMs)
  }

  miss(key: string, nowMs: number): void {
    const before = this.#misses.get(key)
    const count = before && nowMs - before.lastMs < FORGET_MS ? before.count + 1 : 1
    // Put again at the end: the first key of a Map is then the one that has been quiet for longest.
    this.#misses.delete(key)
    this.#misses.set(key, { count, lastMs: nowMs })
    if (this.#misses.size > MOST_KEYS) {
      const oldest = this.#misses.keys().next()
      if (!oldest.done) this.#misses.delete(oldest.value)
    }
  }

  hit(key: string): void {
    this.#misses.delete(key)
  }
}
