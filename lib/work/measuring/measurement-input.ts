/** What a person sends of a measurement. Numbers that follow from it are worked out on the server too, by the same functions. */
import { z } from 'zod'
import { plainText } from '@/lib/platform/problems/plain-text'
import { RedshiftChoices } from './redshift-choice'

/** An arc of a cluster reaches an arcminute; ten times that is no cutout any more. */
const FARTHEST_ARCSEC = 600

const coordinate = z
  .number('A place on the picture is two numbers of arcsec, to the east and to the north.')
  .min(-FARTHEST_ARCSEC, `A place lies at most ${FARTHEST_ARCSEC}″ from the candidate.`)
  .max(FARTHEST_ARCSEC, `A place lies at most ${FARTHEST_ARCSEC}″ from the candidate.`)

const Offset = z.object({ east: coordinate, north: coordinate })

const angle = (what: string) =>
  z
    .number(`${what} is a number of degrees.`)
    .min(0, `${what} lies from 0 to 180°.`)
    .max(180, `${what} lies from 0 to 180°.`)

export const MOST_POINTS = 200

export const LENS_KINDS = ['sphere', 'ellipsoid', 'sphere-shear', 'ellipsoid-shear'] as const

const Lens = z.object({
  centre: Offset,
  einsteinRadiusArcsec: z
    .number('The Einstein radius is a number of arcsec above 0.')
    .positive('The Einstein radius is a number of arcsec above 0.')
    .max(120, 'The Einstein radius is at most 120″.'),
  axisRatio: z
    .number('The axis ratio is a number from 0.05 to 1.')
    .min(0.05, 'The axis ratio lies from 0.05 to 1.')
    .max(1, 'The axis ratio lies from 0.05 to 1.'),
  positionAngleDeg: angle('The position angle'),
  shear: z
    .object({
      strength: z
        .number('Shear is a number from 0 to 0.9.')
        .min(0, 'Shear lies from 0 to 0.9.')
        .max(0.9, 'Shear lies from 0 to 0.9.'),
      positionAngleDeg: angle('The angle of the shear'),
    })
    .optional(),
})

export const ModelShape = z.object({
  kind: z.literal('model'),
  lens: Lens,
  source: Offset,
  sourceRadiusArcsec: z
    .number('The size of the source is a number of arcsec above 0.')
    .positive('The size of the source is a number of arcsec above 0.')
    .max(30, 'The size of the source is at most 30″.'),
  /** How it was fitted to the points; null of a model set by hand. */
  fit: z.object({ kind: z.enum(LENS_KINDS), pointsAre: z.enum(['images', 'arc']) }).nullable(),
})

export const MeasuredShape = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('circle'), centre: z.enum(['free', 'held']) }),
  z.object({ kind: z.literal('ellipse') }),
  ModelShape,
])
export type MeasuredShape = z.output<typeof MeasuredShape>
export type ModelShape = z.output<typeof ModelShape>

export const MeasurementInput = z.object({
  uid: z
    .string()
    .regex(
      /^[0-9A-Za-z-]{16,64}$/,
      'A measurement carries an id of 16 to 64 letters and digits, made by whoever sends it.',
    ),
  /** Key of the view that it was made on. */
  view: z.string().min(1).max(60),
  pixelScaleArcsec: z
    .number('The pixel scale of this view is not known, so nothing can be measured on it.')
    .positive('The pixel scale is a number of arcsec above 0.'),
  points: z.array(Offset).max(MOST_POINTS, `At most ${MOST_POINTS} points.`),
  shape: MeasuredShape,
  redshifts: RedshiftChoices,
  remark: plainText('The remark')
    .pipe(z.string().max(2000, 'A remark has at most 2000 characters.'))
    .transform((text) => text || null)
    .nullable(),
})
export type MeasurementInput = z.output<typeof MeasurementInput>
