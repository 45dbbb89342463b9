/**
 * The unknowns of a lens fit as numbers that a search can move freely: logarithm of the radius, source, and for each of
 * ellipticity and shear two components on twice the position angle, which have no seam at 0 degrees and none at a round lens.
 */
import type { Shear, ShearedLens } from './sie-shear'
import type { SkyVector } from './sis'

export type LensKind = 'sphere' | 'ellipsoid' | 'sphere-shear' | 'ellipsoid-shear'

/** Radius and the source's two coordinates; two more for ellipticity, two more for shear. */
export const FREE_PARAMETERS: Readonly<Record<LensKind, number>> = {
  sphere: 3,
  ellipsoid: 5,
  'sphere-shear': 5,
  'ellipsoid-shear': 7,
}

const hasEllipse = (kind: LensKind) => kind === 'ellipsoid' || kind === 'ellipsoid-shear'
const hasShear = (kind: LensKind) => kind === 'sphere-shear' || kind === 'ellipsoid-shear'

/** Largest (1 - f) / (1 + f), an axis ratio of 0.05, and largest shear that the search reaches. */
const MOST_ELLIPTICITY = 0.9
const MOST_SHEAR = 0.9

export interface FittedParameter {
  name: string
  value: number
  /** 1 sigma; null where the points do not determine it */
  uncertainty: number | null
  unit: 'arcsec' | 'deg' | ''
}

/** What the search leaves as it is. */
export interface HeldLens {
  /** where the lens is */
  centre: SkyVector
  /** used by kinds without a free ellipse, such as the shape of the galaxy's light behind two images; round when left out */
  ellipse?: { axisRatio: number; positionAngleDeg: number }
  /** used by kinds without free shear; none when left out */
  shear?: Shear
}

export interface LensAndSource {
  lens: ShearedLens
  source: SkyVector
}

export function lensOf(kind: LensKind, parameters: readonly number[], held: HeldLens): LensAndSource {
  const [logRadius, east, north, ...rest] = parameters
  const { centre } = held
  const ellipse = hasEllipse(kind) ? bounded(rest[0], rest[1], MOST_ELLIPTICITY) : null
  const free = hasShear(kind) ? bounded(rest.at(-2) ?? 0, rest.at(-1) ?? 0, MOST_SHEAR) : null
  const shear = free ? { strength: free.size, positionAngleDeg: free.angleDeg } : held.shear
  return {
    lens: {
      einsteinRadiusArcsec: Math.exp(Math.min(logRadius, 20)),
      axisRatio: ellipse ? (1 - ellipse.size) / (1 + ellipse.size) : (held.ellipse?.axisRatio ?? 1),
      positionAngleDeg: ellipse ? ellipse.angleDeg : (held.ellipse?.positionAngleDeg ?? 0),
      centre,
      ...(shear && { shear }),
    },
    source: { east: centre.east + east, north: centre.north + north },
  }
}

/** Components to size and angle; the size nears its limit smoothly (tanh) and equals the components' where it is small. */
function bounded(cosine: number, sine: number, most: number): { size: number; angleDeg: number } {
  const angle = (Math.atan2(sine, cosine) * 90) / Math.PI
  return { size: most * Math.tanh(Math.hypot(cosine, sine) / most), angleDeg: (angle + 180) % 180 }
}

/** The unknowns at which `lensOf` gives this lens and source, for a search that begins there; what a kind leaves out is left out. */
export function unknownsOf(kind: LensKind, { lens, source }: LensAndSource, { centre }: HeldLens): number[] {
  const ellipse = components((1 - lens.axisRatio) / (1 + lens.axisRatio), lens.positionAngleDeg, MOST_ELLIPTICITY)
  const shear = components(lens.shear?.strength ?? 0, lens.shear?.positionAngleDeg ?? 0, MOST_SHEAR)
  const place = [source.east - centre.east, source.north - centre.north]
  return [
    Math.log(lens.einsteinRadiusArcsec),
    ...place,
    ...(hasEllipse(kind) ? ellipse : []),
    ...(hasShear(kind) ? shear : []),
  ]
}

/** The inverse of `bounded`. A size of exactly 0 has no direction and would leave the search without a slope. */
function components(size: number, angleDeg: number, most: number): [number, number] {
  const length = Math.max(1e-3, most * Math.atanh(Math.min(size / most, 0.999)))
  return [length * cosine(2 * angleDeg), length * sine(2 * angleDeg)]
}

function meanRadius(points: readonly SkyVector[], centre: SkyVector): number {
  const sum = points.reduce((total, { east, north }) => total + Math.hypot(east - centre.east, north - centre.north), 0)
  return sum / points.length
}

/** Starts all round: a search that begins at one angle can end in a lesser valley. */
export function startsFor(kind: LensKind, points: readonly SkyVector[], centre: SkyVector): number[][] {
  const base = [Math.log(meanRadius(points, centre)), 0, 0]
  const around = (size: number) => [0, 90, 180, 270].map((angle) => [size * cosine(angle), size * sine(angle)])
  const ellipses = hasEllipse(kind) ? [...around(0.1), ...around(0.3)] : [[]]
  const shears = hasShear(kind)
    ? hasEllipse(kind)
      ? [[0.01, 0.01], ...around(0.1)]
      : [...around(0.05), ...around(0.2)]
    : [[]]
  return ellipses.flatMap((ellipse) => shears.map((shear) => [...base, ...ellipse, ...shear]))
}

const cosine = (deg: number) => Math.cos((deg * Math.PI) / 180)
const sine = (deg: number) => Math.sin((deg * Math.PI) / 180)

/** Sizes of meaningful changes, for differences and for deciding that a search has settled. */
export function stepsFor(kind: LensKind, points: readonly SkyVector[], centre: SkyVector): number[] {
  const radius = meanRadius(points, centre)
  return [1, radius, radius, ...new Array<number>(FREE_PARAMETERS[kind] - 3).fill(1)]
}

/** What a person reads, with uncertainties to first order from the covariance of the unknowns. */
export function parametersOf(
  kind: LensKind,
  parameters: readonly number[],
  covariance: readonly (readonly number[])[] | null,
  held: HeldLens,
): FittedParameter[] {
  const errorOf = (of: (fit: LensAndSource) => number, period: number): number | null => {
    if (covariance === null) return null
    const slopes = parameters.map((_, k) => {
      const shifted = (by: number) => of(lensOf(kind, withShift(parameters, k, by), held))
      const difference = shifted(SMALL) - shifted(-SMALL)
      return (period === 0 ? difference : difference - period * Math.round(difference / period)) / (2 * SMALL)
    })
    let variance = 0
    for (const [i, row] of covariance.entries()) {
      for (const [j, value] of row.entries()) variance += value * slopes[i] * slopes[j]
    }
    return Math.sqrt(Math.max(0, variance))
  }
  const plain = (name: string, unit: FittedParameter['unit'], of: (fit: LensAndSource) => number): FittedParameter => {
    return { name, unit, value: of(lensOf(kind, parameters, held)), uncertainty: errorOf(of, 0) }
  }
  /** Size and angle from two components; `first` is the place of the first of them. */
  const polar = (first: number, size: FittedParameter, angleOf: (fit: LensAndSource) => number): FittedParameter[] => {
    const value = angleOf(lensOf(kind, parameters, held))
    const angle: FittedParameter = { name: '', unit: 'deg', value, uncertainty: errorOf(angleOf, 180) }
    if (covariance === null) return [size, angle]
    // Neither an axis ratio nor shear can be off by more than 1: such an error says that nothing is known.
    if ((size.uncertainty ?? 0) > 1)
      return [
        { ...size, uncertainty: null },
        { ...angle, uncertainty: null },
      ]
    const componentError = Math.sqrt((covariance[first][first] + covariance[first + 1][first + 1]) / 2)
    // Within its own error of 0 a size has no slope to carry the error by, and no direction.
    if (Math.hypot(parameters[first], parameters[first + 1]) > componentError) return [size, angle]
    const scale = size.name === 'axis ratio' ? 2 : 1
    return [
      { ...size, uncertainty: scale * componentError },
      { ...angle, uncertainty: null },
    ]
  }
  const named = (name: string, [size, angle]: FittedParameter[]) => [size, { ...angle, name }]
  const ellipse = () =>
    polar(
      3,
      plain('axis ratio', '', ({ lens }) => lens.axisRatio),
      ({ lens }) => lens.positionAngleDeg,
    )
  const shear = () =>
    polar(
      parameters.length - 2,
      plain('shear', '', ({ lens }) => lens.shear?.strength ?? 0),
      ({ lens }) => lens.shear?.positionAngleDeg ?? 0,
    )
  return [
    plain('Einstein radius', 'arcsec', ({ lens }) => lens.einsteinRadiusArcsec),
    ...(hasEllipse(kind) ? named('position angle', ellipse()) : []),
    ...(hasShear(kind) ? named('shear angle', shear()) : []),
    plain('source east', 'arcsec', ({ source }) => source.east),
    plain('source north', 'arcsec', ({ source }) => source.north),
  ]
}

const SMALL = 1e-6

function withShift(parameters: readonly number[], which: number, by: number): number[] {
  return parameters.map((value, k) => (k === which ? value + by : value))
}
