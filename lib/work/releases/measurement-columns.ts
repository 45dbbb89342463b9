import type { ReleasedMeasurementRow } from '@/db/queries/release-beside'
import { fromJson, type Json } from '@/db/schema/values'
import type { Cosmology } from '@/lib/science/lensing/cosmology'
import type { EinsteinMass, Interval } from '@/lib/science/lensing/einstein-mass'
import type { CellValue, Column } from '@/lib/science/formats/columns'
import { HERE, type Fitted, type FittedModel } from '@/lib/work/measuring/fitted'
import { VISUAL_CAUTION } from './cautions'

/** A measurement that stood, as the release tells it. */
export interface ReleasedMeasurement {
  entry: string
  name: string
  by: string
  /** It is the person's one that the catalogue's radius was combined from. */
  used: boolean
  row: ReleasedMeasurementRow
  fitted: Fitted
  mass: EinsteinMass | null
  cosmology: Cosmology | null
}

export function releasedMeasurement(
  row: ReleasedMeasurementRow,
  beside: Pick<ReleasedMeasurement, 'entry' | 'name' | 'by' | 'used'>,
): ReleasedMeasurement {
  return {
    ...beside,
    row,
    fitted: fromJson(row.fitted as Json<Fitted>),
    mass: row.mass && fromJson(row.mass as Json<EinsteinMass>),
    cosmology: row.cosmology && fromJson(row.cosmology as Json<Cosmology>),
  }
}

type Of<Value> = (of: ReleasedMeasurement) => Value

const text = (name: string, description: string, value: Of<string | null>): Column<ReleasedMeasurement> => ({
  name,
  datatype: 'unicodeChar',
  description,
  value,
})
const number = (
  name: string,
  unit: string,
  description: string,
  value: Of<number | null>,
): Column<ReleasedMeasurement> => ({ name, datatype: 'double', ...(unit && { unit }), description, value })

const model = ({ fitted }: ReleasedMeasurement): FittedModel | null => (fitted.kind === 'model' ? fitted : null)

const redshift = (of: 'lens' | 'source'): Column<ReleasedMeasurement>[] => [
  number(`${of}_redshift`, '', `Redshift of the ${of} that mass and delays were worked out with`, ({ row }) =>
    of === 'lens' ? row.lens_redshift : row.source_redshift,
  ),
  text(
    `${of}_redshift_basis`,
    "given: the candidate's own; typed: by who measured; assumed: the middle of a range",
    ({ row }) => (of === 'lens' ? row.lens_redshift_basis : row.source_redshift_basis),
  ),
  number(`${of}_redshift_error`, '', 'Its error, 1 sigma, where one was typed', ({ row }) =>
    of === 'lens' ? row.lens_redshift_error : row.source_redshift_error,
  ),
  number(`${of}_redshift_low`, '', 'Lower end of the range that was assumed', ({ row }) =>
    of === 'lens' ? row.lens_redshift_low : row.source_redshift_low,
  ),
  number(`${of}_redshift_high`, '', 'Upper end of the range that was assumed', ({ row }) =>
    of === 'lens' ? row.lens_redshift_high : row.source_redshift_high,
  ),
]

const interval = (name: string, unit: string, what: string, of: (mass: EinsteinMass) => Interval) => [
  number(name, unit, `${what}; empty without both redshifts`, ({ mass }) => mass && of(mass).value),
  number(`${name}_low`, unit, 'Lower end of its middle 68.27 %', ({ mass }) => mass && of(mass).low),
  number(`${name}_high`, unit, 'Upper end of its middle 68.27 %', ({ mass }) => mass && of(mass).high),
]

const placed = (points: readonly { east: number; north: number }[], rest: (place: number) => CellValue[]): string =>
  points
    .map(({ east, north }, place) => [east, north, ...rest(place)].map((value) => value ?? '-').join(' '))
    .join('; ')

/** `measurements.csv`: places are offsets from the candidate's position, to the east and to the north. */
export const MEASUREMENT_COLUMNS: readonly Column<ReleasedMeasurement>[] = [
  text('entry', "Last part of the entry's permanent address", (of) => of.entry),
  text('name', 'Name of the candidate in its campaign', (of) => of.name),
  text('measured_by', 'Pseudonym, the same as in grades.csv', (of) => of.by),
  text('measured_on', 'Day, UTC', ({ row }) => row.at.slice(0, 10)),
  text(
    'used',
    'yes or no: whether einstein_radius of the catalogue was combined from it: one of each person, the newest that has an error, else the newest',
    ({ used }) => (used ? 'yes' : 'no'),
  ),
  text('kind', 'circle, ellipse, or model of a lens', ({ row }) => row.kind),
  text('method', 'How it was found', methodOf),
  text('view', 'Picture that it was measured on', ({ row }) => row.view),
  number('pixel_scale', 'arcsec', 'Size of a pixel of that picture', ({ row }) => row.pixel_scale_arcsec),
  number('einstein_radius', 'arcsec', 'Einstein radius', ({ row }) => row.einstein_radius_arcsec),
  number(
    'einstein_radius_error',
    'arcsec',
    'Its error, 1 sigma, from a placing error of half a pixel a point; empty of a model set by hand',
    ({ row }) => row.error_arcsec,
  ),
  number('residual', 'arcsec', 'Root mean square distance of the points', ({ fitted }) => fitted.residualArcsec),
  number('n_points', '', 'Points that were placed', ({ row }) => fromJson(row.points).length),
  text('points', "Points that were placed, 'east north' in arcsec, separated by semicolons", ({ row }) =>
    placed(fromJson(row.points), () => []),
  ),
  ...redshift('lens'),
  ...redshift('source'),
  ...interval(
    'velocity_dispersion',
    'km/s',
    'Velocity dispersion of the singular isothermal sphere',
    (mass) => mass.velocityDispersionKmS,
  ),
  ...interval('mass', 'solMass', 'Mass within the Einstein radius', (mass) => mass.massSolar),
  ...interval('critical_density', 'solMass/pc2', 'Critical surface density', (mass) => mass.criticalDensitySolarPerPc2),
  text('cosmology', 'Cosmology that they were worked out in', ({ mass, cosmology }) =>
    mass && cosmology ? cosmology.name : null,
  ),
  number('hubble_constant', 'km/s/Mpc', 'Its Hubble constant', ({ mass, cosmology }) =>
    mass ? (cosmology?.hubble ?? null) : null,
  ),
  number('omega_matter', '', 'Its density of matter', ({ mass, cosmology }) =>
    mass && cosmology ? cosmology.omegaMatter : null,
  ),
  number('centre_east', 'arcsec', 'Centre of circle, ellipse or lens', (of) => centreOf(of).east),
  number('centre_north', 'arcsec', 'Centre of circle, ellipse or lens', (of) => centreOf(of).north),
  number('axis_ratio', '', 'Minor over major axis, of an ellipse or a lens', axisRatio),
  number('position_angle', 'deg', 'Of the major axis, from north through east', ({ fitted }) => {
    if (fitted.kind === 'circle') return null
    return fitted.kind === 'model' ? fitted.lens.positionAngleDeg : fitted.positionAngleDeg
  }),
  number('shear', '', 'Strength of the external shear of a model', (of) => model(of)?.lens.shear?.strength ?? null),
  number('shear_position_angle', 'deg', 'Its angle', (of) => model(of)?.lens.shear?.positionAngleDeg ?? null),
  number('source_east', 'arcsec', 'Place of the source of a model', (of) => model(of)?.source.east ?? null),
  number('source_north', 'arcsec', 'Place of the source of a model', (of) => model(of)?.source.north ?? null),
  number('source_radius', 'arcsec', 'Size of the source of a model', (of) => model(of)?.sourceRadiusArcsec ?? null),
  number('chi_squared', '', 'Of a fitted model', (of) => model(of)?.fit?.chiSquared ?? null),
  number('degrees_of_freedom', '', 'Of the fit', ({ fitted }) =>
    fitted.kind === 'model' ? (fitted.fit?.degreesOfFreedom ?? null) : fitted.degreesOfFreedom,
  ),
  text(
    'images',
    "Images of a model, 'east north magnification delay' in arcsec and days, '-' where there is none, separated by semicolons",
    (of) => {
      const images = model(of)?.images ?? []
      return placed(images, (place) => [images[place].magnification, images[place].delayDays]) || null
    },
  ),
  text(
    'basis',
    `What the row rests on. ${VISUAL_CAUTION}`,
    () => 'measured on images, not a spectroscopic confirmation',
  ),
]

const centreOf = ({ fitted }: ReleasedMeasurement) =>
  fitted.kind === 'model' ? (fitted.lens.centre ?? HERE) : fitted.centre

function axisRatio({ fitted }: ReleasedMeasurement): number | null {
  if (fitted.kind === 'circle') return null
  return fitted.kind === 'model' ? fitted.lens.axisRatio : fitted.semiMinorArcsec / fitted.semiMajorArcsec
}

const LENS_WORDS = {
  sphere: 'isothermal sphere',
  ellipsoid: 'isothermal ellipsoid',
  'sphere-shear': 'isothermal sphere with shear',
  'ellipsoid-shear': 'isothermal ellipsoid with shear',
}

function methodOf({ fitted }: ReleasedMeasurement): string {
  if (fitted.kind === 'ellipse') return 'ellipse fitted to points along the arc; the radius is sqrt(a b)'
  if (fitted.kind === 'circle') {
    return fitted.centreIsHeld
      ? 'circle fitted to points along the arc, its centre held at the candidate'
      : 'circle fitted to points along the arc'
  }
  if (!fitted.fit) return 'model set by hand'
  return `${LENS_WORDS[fitted.fit.kind]} fitted to ${fitted.fit.pointsAre === 'images' ? 'images of a point' : 'points along an arc'}`
}
