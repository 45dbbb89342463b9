/**
 * A random order of a campaign's candidates for each person, without keeping one: the range of the numbers by which they are spread is cut into
 * blocks of some hundred candidates; a person goes through the blocks, and through the candidates of a block, in an order of their own. Pure.
 */

/** 2^32: the spread is a whole number below it. */
const RANGE = 2 ** 32
const BLOCK = 256

/** A power of two, so that it changes seldom while candidates come in, and the order with it. */
export function blocksFor(candidates: number): number {
  return 2 ** Math.max(0, Math.ceil(Math.log2(Math.max(1, candidates) / BLOCK)))
}

/** Every block once: an odd step is prime to a power of two, so that the steps visit all. */
export function blockAt(place: number, blocks: number, seed: number): number {
  const step = mixed(seed) | 1
  return (Math.imul(step, place) + mixed(seed + 1)) & (blocks - 1)
}

export function spreadRange(block: number, blocks: number): { from: number; to: number } {
  return { from: (block * RANGE) / blocks, to: ((block + 1) * RANGE) / blocks }
}

/** In the person's order. */
export function shuffledBy<T extends { id: number }>(candidates: readonly T[], seed: number): T[] {
  return candidates.toSorted((a, b) => mixed(a.id ^ seed) - mixed(b.id ^ seed) || a.id - b.id)
}

/** Mixes the bits of a 32-bit number; one to one (finalizer of MurmurHash3, Appleby 2011, public domain). */
function mixed(value: number): number {
  let hash = value | 0
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b)
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35)
  return (hash ^ (hash >>> 16)) >>> 0
}
