/**
 * Brightness of a galaxy against elliptical radius as a sum of Gaussians that are not negative (multi-Gaussian expansion:
 * E. Emsellem et al., A&A 285, 723 (1994); M. Cappellari, MNRAS 333, 400 (2002)).
 *
 * Such sums are the functions that are completely monotone in the square of the radius: every Sersic profile of index 0.5 or
 * more and every Moffat is one, sharp or blurred, and nothing that rises outwards or has a shoulder is. So a ring of light at
 * constant radius cannot be mistaken for the galaxy, however well it is centred.
 */
import { nonNegativeLeastSquares } from './nnls'

/** Steps a pixel of the table of a profile. */
const STEPS = 8
const NARROWEST = 0.75
const RATIO = 1.5
/** Allowed departure of the sky from its estimate, in units of its noise: the prior of the pedestal. */
const PEDESTAL_SIGMA = 0.1

export class ProfileBasis {
  /** Standard deviations of the Gaussians, pixels. */
  readonly widths: number[]
  /** tables[k][s]: Gaussian k at radius s / STEPS. */
  readonly tables: Float64Array[]
  readonly length: number

  /** @param reach radius to which profiles are needed, pixels. */
  constructor(readonly reach: number) {
    this.length = Math.ceil(reach * STEPS) + 3
    this.widths = []
    for (let width = NARROWEST; width < Math.max(2, 0.8 * reach); width *= RATIO) this.widths.push(width)
    this.tables = this.widths.map((width) => {
      const table = new Float64Array(this.length)
      for (let s = 0; s < table.length; s++) table[s] = Math.exp(-0.5 * (s / STEPS / width) ** 2)
      return table
    })
  }
}

let latest: ProfileBasis | null = null

/** The basis for this reach. Cutouts of a survey have one size, so the latest is kept. */
export function basisFor(reach: number): ProfileBasis {
  if (latest?.reach !== reach) latest = new ProfileBasis(reach)
  return latest
}

/** A profile ready for use: brightness by table. */
export class RadialProfile {
  readonly table: Float64Array

  constructor(
    readonly basis: ProfileBasis,
    /** Central brightness of each Gaussian. */
    readonly amplitudes: Float64Array,
    /** Light that is the same everywhere; may be negative. */
    readonly pedestal: number,
    /** Share of the foreign light that the band holds. */
    readonly foreignShare = 0,
  ) {
    this.table = new Float64Array(basis.length)
    basis.tables.forEach((gaussian, k) => {
      const amplitude = amplitudes[k]
      if (amplitude !== 0) for (let s = 0; s < gaussian.length; s++) this.table[s] += amplitude * gaussian[s]
    })
  }

  /** Galaxy light without the pedestal, by linear interpolation; beyond the reach the last value. */
  at(radius: number): number {
    const position = radius * STEPS
    const s = position < this.table.length - 2 ? position | 0 : this.table.length - 2
    const share = position - s < 1 ? position - s : 1
    return this.table[s] + share * (this.table[s + 1] - this.table[s])
  }

  /** Change per pixel of radius, 0 or less. */
  slopeAt(radius: number): number {
    const position = radius * STEPS
    const s = position < this.table.length - 2 ? position | 0 : this.table.length - 2
    return (this.table[s + 1] - this.table[s]) * STEPS
  }
}

export interface ProfileRows {
  /** Mean of each Gaussian over the pixels of a row: means[k][row]. */
  means: Float64Array[]
  /** Light of another colour in each row, of which the fit takes off the share that suits it. */
  foreign: Float64Array
  /** Brightness and its error, by row. An infinite error leaves the row out. */
  brightness: Float64Array
  errors: Float64Array
}

/** Rounds in which rows above the fit lose weight. */
const ROUNDS = 3
/** A row this many errors above the fit begins to lose weight; rows below never do. */
const TOLERATED = 1.2
/** Rows that hold foreign light say how much of it there is, and are believed longer. */
const TOLERATED_FOREIGN = 3

/**
 * The profile nearest to the rows. Light that is not the galaxy's only ever adds, so a row that stands above the fit is
 * trusted less and less (weight over the square of its excess), one that lies below is not.
 */
export function fitProfile(basis: ProfileBasis, { means, foreign, brightness, errors }: ProfileRows): RadialProfile {
  const count = basis.widths.length
  const rows = brightness.length
  const size = count + 3
  const trust = new Float64Array(rows).fill(1)
  let solution: Float64Array = new Float64Array(size)
  for (let round = 0; round < ROUNDS; round++) {
    const gram = new Float64Array(size * size)
    const moment = new Float64Array(size)
    const column = new Float64Array(size)
    for (let row = 0; row < rows; row++) {
      const weight = trust[row] / errors[row] ** 2
      if (!(weight > 0)) continue
      for (let k = 0; k < count; k++) column[k] = means[k][row]
      column[count] = 1
      column[count + 1] = -1
      column[count + 2] = foreign[row]
      for (let i = 0; i < size; i++) {
        const weighted = weight * column[i]
        moment[i] += weighted * brightness[row]
        for (let j = 0; j <= i; j++) gram[i * size + j] += weighted * column[j]
      }
    }
    for (let i = count; i < count + 2; i++) gram[i * size + i] += 1 / PEDESTAL_SIGMA ** 2
    for (let i = 0; i < size; i++) for (let j = i + 1; j < size; j++) gram[i * size + j] = gram[j * size + i]
    solution = nonNegativeLeastSquares(gram, moment)
    let moved = false
    for (let row = 0; row < rows; row++) {
      let fitted = solution[count] - solution[count + 1] + solution[count + 2] * foreign[row]
      for (let k = 0; k < count; k++) fitted += solution[k] * means[k][row]
      const excess = (brightness[row] - fitted) / errors[row]
      const tolerated = foreign[row] === 0 ? TOLERATED : TOLERATED_FOREIGN
      const next = excess > tolerated ? (tolerated / excess) ** 2 : 1
      if (Math.abs(next - trust[row]) > 0.05) moved = true
      trust[row] = next
    }
    if (!moved) break
  }
  return new RadialProfile(
    basis,
    solution.subarray(0, count),
    solution[count] - solution[count + 1],
    solution[count + 2],
  )
}
