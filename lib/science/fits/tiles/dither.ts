// The random numbers of subtractive dithering (FITS Standard 4.0, 10.2 and appendix I: Park & Miller, CACM 31, 1192, 1988,
// multiplier 16807, modulus 2^31 - 1, seed 1). They are part of the format, not chance.

const COUNT = 10000
let sequence: Float32Array | null = null

export function ditherSequence(): Float32Array {
  if (sequence !== null) return sequence
  const made = new Float32Array(COUNT)
  let seed = 1
  for (let i = 0; i < COUNT; i++) {
    seed = (16807 * seed) % 2147483647
    made[i] = seed / 2147483647
  }
  return (sequence = made)
}

/** Hands out the random number of each pixel of one tile in turn. `tile` counts from 0; `seed` is ZDITHER0, 1 to 10000. */
export function ditherOfTile(tile: number, seed: number): () => number {
  const random = ditherSequence()
  let row = (tile + seed - 1) % COUNT
  let next = Math.floor(random[row] * 500)
  return () => {
    const value = random[next++]
    if (next === COUNT) {
      row = (row + 1) % COUNT
      next = Math.floor(random[row] * 500)
    }
    return value
  }
}
