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

/**
 * Galaxies' spectra lie above a straight line between the shortest and the longest of the usual bands (g - r = 0.65,
 * r - i = 0.3 gives 17 % in the middle), blue sources hardly (0 to 5 %). Uncorrected, galaxies come out greenish;
 * corrected in full, blue arcs come out violet. This share lies between.
 */
const SPECTRAL_BULGE = 0.05

/** A band whose noise is further from the line than this factor is taken to have a unit of its own. */
const COMMON_UNIT_FACTOR = 2

/**
 * Factors on noise-normalised planes that bring back the colours of the sky. Bands of one survey share a unit, and
 * their noise differs for two reasons: it rises evenly with wavelength, which pictures may well balance out, and one
 * band is deeper than its neighbours, which says nothing about the objects and would tint everything green or magenta.
 * So each plane counts in units of the straight line through log(noise) against place in wavelength. When the noises do
 * not lie near a line the bands have no common unit, and each keeps its own noise. Our own choice by eye on real
 * cutouts, no source.
 * @param sigmas noise of each band in its own unit, above 0, shortest wavelength first.
 */
export function colourBalance(sigmas: number[]): number[] {
  const logs = sigmas.map(Math.log)
  const middle = (logs.length - 1) / 2
  const mean = logs.reduce((sum, value) => sum + value, 0) / logs.length
  const spread = logs.reduce((sum, _, k) => sum + (k - middle) ** 2, 0)
  const slope = logs.reduce((sum, value, k) => sum + (k - middle) * value, 0) / spread
  const offsets = logs.map((value, k) => value - (mean + slope * (k - middle)))
  const common = offsets.every((offset) => Math.abs(offset) < Math.log(COMMON_UNIT_FACTOR))
  const bulge = (k: number) => 1 - SPECTRAL_BULGE * (1 - ((k - middle) / middle) ** 2)
  return offsets.map((offset, k) => (common ? Math.exp(offset) * bulge(k) : 1))
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
