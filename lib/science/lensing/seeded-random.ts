/**
 * Seeded random numbers: xoshiro128** 1.1 of D. Blackman & S. Vigna (2018; ACM TOMS 47, 36 (2021)), placed by its
 * authors in the public domain (prng.di.unimi.it), its state filled from the seed by splitmix32. Not for secrets.
 */
import { logGamma } from './log-gamma'

export class SeededRandom {
  private state: Uint32Array
  private spareNormal: number | null = null

  /** @param seed whole number; equal seeds give equal sequences. Digits beyond 32 bits count too. */
  constructor(seed: number) {
    const high = Math.floor(seed / 2 ** 32) | 0
    this.state = splitmix32((seed | 0) ^ finalise(high))
  }

  /** A generator that starts from the four given words, not all zero. */
  static fromState(words: [number, number, number, number]): SeededRandom {
    const random = new SeededRandom(0)
    random.state = Uint32Array.from(words)
    return random
  }

  /** Uniform whole number in [0, 2^32). */
  next32(): number {
    const s = this.state
    const result = Math.imul(rotateLeft(Math.imul(s[1], 5), 7), 9) >>> 0
    const t = s[1] << 9
    s[2] ^= s[0]
    s[3] ^= s[1]
    s[1] ^= s[2]
    s[0] ^= s[3]
    s[2] ^= t
    s[3] = rotateLeft(s[3], 11)
    return result
  }

  /** Uniform in [0, 1) with 53 random bits. */
  uniform(): number {
    return ((this.next32() >>> 5) * 67108864 + (this.next32() >>> 6)) / 9007199254740992
  }

  /** Uniform in [low, high). */
  between(low: number, high: number): number {
    return low + (high - low) * this.uniform()
  }

  /** Uniform whole number from low to high, both included. */
  integer(low: number, high: number): number {
    return low + Math.floor(this.uniform() * (high - low + 1))
  }

  chance(probability: number): boolean {
    return this.uniform() < probability
  }

  /** Normal with mean 0 and variance 1: Marsaglia's polar method (SIAM Review 6, 260 (1964)). */
  normal(): number {
    if (this.spareNormal !== null) {
      const spare = this.spareNormal
      this.spareNormal = null
      return spare
    }
    let u: number
    let v: number
    let square: number
    do {
      u = 2 * this.uniform() - 1
      v = 2 * this.uniform() - 1
      square = u * u + v * v
    } while (square >= 1 || square === 0)
    const scale = Math.sqrt((-2 * Math.log(square)) / square)
    this.spareNormal = v * scale
    return u * scale
  }

  /**
   * Poisson with the given mean, 0 for a mean of 0 or less. Below 10 by multiplication (D. Knuth, TAOCP 2, 3.4.1),
   * above by transformed rejection, algorithm PTRS of W. Hoermann, Insurance: Mathematics and Economics 12, 39 (1993).
   */
  poisson(mean: number): number {
    if (!(mean > 0)) return 0
    return mean < 10 ? this.poissonByProduct(mean) : this.poissonByRejection(mean)
  }

  private poissonByProduct(mean: number): number {
    const limit = Math.exp(-mean)
    let count = 0
    let product = this.uniform()
    while (product > limit) {
      count++
      product *= this.uniform()
    }
    return count
  }

  private poissonByRejection(mean: number): number {
    const b = 0.931 + 2.53 * Math.sqrt(mean)
    const a = -0.059 + 0.02483 * b
    const inverseAlpha = 1.1239 + 1.1328 / (b - 3.4)
    const vR = 0.9277 - 3.6224 / (b - 2)
    for (;;) {
      const u = this.uniform() - 0.5
      const v = this.uniform()
      const us = 0.5 - Math.abs(u)
      const count = Math.floor(((2 * a) / us + b) * u + mean + 0.43)
      if (us >= 0.07 && v <= vR) return count
      if (count < 0 || (us < 0.013 && v > us)) continue
      const logAccept = count * Math.log(mean) - mean - logGamma(count + 1)
      if (Math.log((v * inverseAlpha) / (a / (us * us) + b)) <= logAccept) return count
    }
  }
}

function rotateLeft(word: number, bits: number): number {
  return (word << bits) | (word >>> (32 - bits))
}

/**
 * Finaliser of MurmurHash3 (A. Appleby, public domain): every bit of the input reaches every bit of the output; 0 stays
 * 0.
 */
function finalise(word: number): number {
  let z = word
  z = Math.imul(z ^ (z >>> 16), 0x85ebca6b)
  z = Math.imul(z ^ (z >>> 13), 0xc2b2ae35)
  return z ^ (z >>> 16)
}

/** G. Steele, D. Lea & C. Flood, OOPSLA 2014, in 32 bits. */
function splitmix32(seed: number): Uint32Array {
  const words = new Uint32Array(4)
  let state = seed | 0
  for (let k = 0; k < 4; k++) {
    state = (state + 0x9e3779b9) | 0
    words[k] = finalise(state)
  }
  return words
}
