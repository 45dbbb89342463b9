/** Which bands make red, green and blue, and the three channel images. */
import type { NormalisedPlane } from './normalise-planes'

/**
 * Shares the bands, shortest wavelength first, out over blue, green and red: the k-th of n bands sits at 2 k / (n - 1)
 * between blue (0), green (1) and red (2) and gives to the two nearest. Three bands map one to one; of two, green is
 * the mean.
 * @returns weights[channel][band] for red, green, blue; each channel's sum is 1.
 */
export function channelWeights(bandCount: number): [number[], number[], number[]] {
  const at = (k: number) => (bandCount === 1 ? 1 : (2 * k) / (bandCount - 1))
  const channel = (position: number): number[] => {
    const raw = Array.from({ length: bandCount }, (_, k) => Math.max(0, 1 - Math.abs(at(k) - position)))
    const shares = raw.some((share) => share > 0) ? raw : raw.map(() => 1)
    const sum = shares.reduce((total, share) => total + share, 0)
    return shares.map((share) => share / sum)
  }
  return [channel(2), channel(1), channel(0)]
}

/** Weighted sum of planes of one size; NaN wherever a plane that counts has no data. */
export function mixPlanes(planes: NormalisedPlane[], weights: number[]): Float32Array {
  const used = planes.flatMap((plane, k) => (weights[k] === 0 ? [] : [{ values: plane.values, weight: weights[k] }]))
  const only = used.length === 1 ? used[0] : null
  if (only && only.weight === 1) return only.values
  const mixed = new Float32Array(planes[0].values.length)
  for (const { values, weight } of used) for (let i = 0; i < mixed.length; i++) mixed[i] += weight * values[i]
  return mixed
}
