/**
 * What an Einstein radius weighs: velocity dispersion of the singular isothermal sphere, mass inside the radius and critical surface
 * density, with the errors of radius and redshifts carried through.
 *   sigma = c sqrt(theta_E D_s / (4 pi D_ls))    M = c^2 theta_E^2 D_l D_s / (4 G D_ls)    Sigma_cr = c^2 D_s / (4 pi G D_l D_ls)
 * Source: R. Narayan & M. Bartelmann, arXiv:astro-ph/9606001. M holds for every circular lens, sigma for the isothermal one.
 *
 * Errors: each input is replaced by values of equal probability (middle of its n equal parts), all combinations are evaluated, and
 * the interval holds the middle 68.27 % of them. It is not drawn at random, so that one input has one answer; no linear
 * approximation, so that wide ranges of redshift give the uneven intervals that they should. A radius below 0 stands for 0: where the
 * error is as large as the radius the interval begins there, instead of leaving out the half of it that lies below.
 */
import { normalQuantile } from '@/lib/science/agreement/quantiles'
import { PARSEC_M, RADIANS_PER_ARCSEC, SOLAR_MASS_PARAMETER_M3_S2, SPEED_OF_LIGHT_KM_S } from './constants'
import { comovingDistanceMpc, type Cosmology } from './cosmology'
import { outOfTheUsual, type UnusualValue } from './usual-lenses'

/** A measured redshift with its error (0 or null when it does not count), or a range within which all are as likely. */
export type RedshiftInput = { value: number; error: number | null } | { low: number; high: number }

export interface EinsteinMassRequest {
  radiusArcsec: number
  /** 1 sigma; 0 to leave it out */
  radiusErrorArcsec: number
  lensRedshift: RedshiftInput
  sourceRedshift: RedshiftInput
  cosmology: Cosmology
}

export interface Interval {
  /** at the central values of the inputs, or the median where those are rarer than what is left of wide ranges; from low to high */
  value: number
  /** ends of the middle 68.27 %; a low of 0 says that only the high end is measured */
  low: number
  high: number
}

export interface EinsteinMass {
  velocityDispersionKmS: Interval
  massSolar: Interval
  criticalDensitySolarPerPc2: Interval
  criticalDensityKgM2: Interval
  radiusKpc: Interval
  /** at the central redshifts, angular diameter distances */
  distancesMpc: { lens: number; source: number; between: number }
  lensRedshift: number
  sourceRedshift: number
  /** a redshift is a range that was assumed: what follows from it must be marked so */
  isAssumed: boolean
  /** share of the combinations of redshifts left out because the source would lie before the lens, 0 to 1 */
  leftOutShare: number
  /** values outside what lenses are usually found to have; they are pointed out, not refused */
  unusual: UnusualValue[]
  notes: string[]
}

/** The inputs cannot be those of a lens. The message says which and why. */
export class EinsteinMassError extends Error {
  readonly name = 'EinsteinMassError'
}

const RADIUS_PARTS = 101
const REDSHIFT_PARTS = 31
const MIDDLE = 0.6826894921370859

/** @throws EinsteinMassError for a radius or redshift not above 0, errors below 0, empty ranges, or a source not behind the lens. */
export function einsteinMass(request: EinsteinMassRequest): EinsteinMass {
  const { radiusArcsec, radiusErrorArcsec, cosmology } = request
  if (!(radiusArcsec > 0 && Number.isFinite(radiusArcsec))) {
    throw new EinsteinMassError(`An Einstein radius is a number of arcsec above 0; ${radiusArcsec} is not.`)
  }
  if (!(radiusErrorArcsec >= 0 && Number.isFinite(radiusErrorArcsec))) {
    throw new EinsteinMassError(`The error of the radius is a number of arcsec from 0; ${radiusErrorArcsec} is not.`)
  }
  const lens = spread(request.lensRedshift, 'lens', REDSHIFT_PARTS)
  const source = spread(request.sourceRedshift, 'source', REDSHIFT_PARTS)
  if (source.centre <= lens.centre) {
    throw new EinsteinMassError(
      `The source (redshift ${source.centre}) must lie behind the lens (redshift ${lens.centre}); check which is which.`,
    )
  }
  const radii = (
    radiusErrorArcsec === 0 ? [radiusArcsec] : normalValues(radiusArcsec, radiusErrorArcsec, RADIUS_PARTS)
  ).map((radius) => Math.max(0, radius))
  const central = geometryOf(cosmology, lens.centre, source.centre)
  const { geometries, leftOutShare } = geometriesOf(cosmology, lens.values, source.values)
  let isMedian = false
  const interval = (of: (radius: number, geometry: Geometry) => number): Interval => {
    const all = new Float64Array(geometries.length * radii.length)
    let count = 0
    for (const geometry of geometries) for (const radius of radii) all[count++] = of(radius, geometry)
    all.sort()
    const [low, high] = [quantileOf(all, (1 - MIDDLE) / 2), quantileOf(all, (1 + MIDDLE) / 2)]
    const value = of(radiusArcsec, central)
    // One value and its interval of one differ in their last bits.
    if (geometries.length * radii.length === 1) return { value, low: value, high: value }
    const slack = 1e-12 * value
    if (value >= low - slack && value <= high + slack) {
      return { value, low: Math.min(low, value), high: Math.max(high, value) }
    }
    isMedian = true
    return { value: quantileOf(all, 0.5), low, high }
  }
  const density = interval((_, geometry) => geometry.criticalDensityKgM2)
  const perPc2 = PARSEC_M ** 2 / SOLAR_MASS_KG
  const result = {
    velocityDispersionKmS: interval((radius, geometry) => geometry.dispersionAtOneArcsec * Math.sqrt(radius)),
    massSolar: interval((radius, geometry) => geometry.massAtOneArcsec * radius * radius),
    criticalDensityKgM2: density,
    criticalDensitySolarPerPc2: {
      value: density.value * perPc2,
      low: density.low * perPc2,
      high: density.high * perPc2,
    },
    radiusKpc: interval((radius, geometry) => radius * RADIANS_PER_ARCSEC * geometry.lensMpc * 1000),
  }
  return {
    ...result,
    distancesMpc: { lens: central.lensMpc, source: central.sourceMpc, between: central.betweenMpc },
    lensRedshift: lens.centre,
    sourceRedshift: source.centre,
    isAssumed: lens.isRange || source.isRange,
    leftOutShare,
    unusual: outOfTheUsual({
      radiusArcsec,
      velocityDispersionKmS: result.velocityDispersionKmS.value,
      massSolar: result.massSolar.value,
      lensRedshift: lens.centre,
      sourceRedshift: source.centre,
    }),
    notes: [
      ...notesOnRadius(radiusArcsec, radiusErrorArcsec),
      ...notesOn(lens.isRange, source.isRange, leftOutShare),
      ...(isMedian ? [MEDIANS] : []),
    ],
  }
}

const MEDIANS =
  'In the middle of these redshifts lens and source are unusually near each other; what would lie beside its own range is the median.'

const notesOnRadius = (radiusArcsec: number, errorArcsec: number): string[] =>
  errorArcsec > radiusArcsec
    ? ['The error of the radius is larger than the radius: it says how much there is at most, not how much there is.']
    : []

/** Mass only follows through GM, which is known better than either: the kilogram needs G, CODATA 2018, good to 2e-5. */
const GRAVITATION = 6.6743e-11
const SOLAR_MASS_KG = SOLAR_MASS_PARAMETER_M3_S2 / GRAVITATION

interface Geometry {
  lensMpc: number
  sourceMpc: number
  betweenMpc: number
  criticalDensityKgM2: number
  massAtOneArcsec: number
  dispersionAtOneArcsec: number
}

function geometryOf(cosmology: Cosmology, lensRedshift: number, sourceRedshift: number): Geometry {
  const near = comovingDistanceMpc(cosmology, lensRedshift)
  return geometryFrom(near, lensRedshift, comovingDistanceMpc(cosmology, sourceRedshift), sourceRedshift)
}

/** In a flat universe the comoving distance between is the difference of the two. */
function geometryFrom(near: number, lensRedshift: number, far: number, sourceRedshift: number): Geometry {
  const lensMpc = near / (1 + lensRedshift)
  const sourceMpc = far / (1 + sourceRedshift)
  const betweenMpc = (far - near) / (1 + sourceRedshift)
  const metres = PARSEC_M * 1e6
  const lightSquared = (SPEED_OF_LIGHT_KM_S * 1000) ** 2
  const angle = RADIANS_PER_ARCSEC
  return {
    lensMpc,
    sourceMpc,
    betweenMpc,
    criticalDensityKgM2: (lightSquared * sourceMpc) / (4 * Math.PI * GRAVITATION * lensMpc * betweenMpc * metres),
    massAtOneArcsec:
      (lightSquared * angle * angle * ((lensMpc * sourceMpc) / betweenMpc) * metres) / (4 * SOLAR_MASS_PARAMETER_M3_S2),
    dispersionAtOneArcsec: SPEED_OF_LIGHT_KM_S * Math.sqrt((angle * sourceMpc) / (4 * Math.PI * betweenMpc)),
  }
}

function geometriesOf(
  cosmology: Cosmology,
  lensRedshifts: readonly number[],
  sourceRedshifts: readonly number[],
): { geometries: Geometry[]; leftOutShare: number } {
  const near = lensRedshifts.map((z) => comovingDistanceMpc(cosmology, z))
  const far = sourceRedshifts.map((z) => comovingDistanceMpc(cosmology, z))
  const geometries = lensRedshifts.flatMap((lens, i) =>
    sourceRedshifts.flatMap((source, j) =>
      lens > 0 && source > lens ? [geometryFrom(near[i], lens, far[j], source)] : [],
    ),
  )
  return { geometries, leftOutShare: 1 - geometries.length / (lensRedshifts.length * sourceRedshifts.length) }
}

function spread(
  input: RedshiftInput,
  what: string,
  parts: number,
): { centre: number; values: number[]; isRange: boolean } {
  if ('low' in input) {
    const { low, high } = input
    if (!(low >= 0 && high > low && Number.isFinite(high))) {
      throw new EinsteinMassError(
        `The range of redshifts of the ${what} must go from 0 or more up to a larger number; ${low} to ${high} does not.`,
      )
    }
    const values = Array.from({ length: parts }, (_, k) => low + ((k + 0.5) / parts) * (high - low))
    return { centre: (low + high) / 2, values, isRange: true }
  }
  const { value, error } = input
  if (!(value > 0 && Number.isFinite(value))) {
    throw new EinsteinMassError(`The redshift of the ${what} must be a number above 0; ${value} is not.`)
  }
  if (error !== null && !(error >= 0 && Number.isFinite(error))) {
    throw new EinsteinMassError(`The error of the redshift of the ${what} must be a number from 0; ${error} is not.`)
  }
  return { centre: value, values: error ? normalValues(value, error, parts) : [value], isRange: false }
}

/** Values of equal probability under a normal distribution. */
function normalValues(mean: number, sigma: number, parts: number): number[] {
  return Array.from({ length: parts }, (_, k) => mean + sigma * normalQuantile((k + 0.5) / parts))
}

/** Of values of equal probability, each standing for the middle of its part. */
function quantileOf(sorted: Float64Array, share: number): number {
  if (sorted.length === 0) return Number.NaN
  const place = Math.max(0, Math.min(sorted.length - 1, share * sorted.length - 0.5))
  const below = Math.floor(place)
  const above = Math.min(sorted.length - 1, below + 1)
  return sorted[below] + (place - below) * (sorted[above] - sorted[below])
}

function notesOn(lensIsRange: boolean, sourceIsRange: boolean, leftOutShare: number): string[] {
  const notes: string[] = []
  if (lensIsRange || sourceIsRange) {
    const which =
      lensIsRange && sourceIsRange ? 'Both redshifts are' : `The redshift of the ${lensIsRange ? 'lens' : 'source'} is`
    notes.push(`${which} an assumed range, not a measurement; mass and dispersion are only as good as that.`)
  }
  if (leftOutShare > 0) {
    notes.push(
      `In ${(100 * leftOutShare).toFixed(1)} % of the redshifts allowed the source is not behind the lens; they are left out.`,
    )
  }
  return notes
}
