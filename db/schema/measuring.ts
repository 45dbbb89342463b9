import type { Generated, Selectable } from 'kysely'
import type { IsoTime, Json } from './values'

export type MeasurementKind = 'circle' | 'ellipse' | 'model'

/** Where a redshift comes from: the candidate's own, typed by the person, or a range that was assumed. */
export type RedshiftBasis = 'given' | 'typed' | 'assumed'

/** Offset on the sky from the candidate's position, arcsec. */
export interface OffsetArcsec {
  east: number
  north: number
}

/** One row is one act: something measured on a candidate, or an own earlier one withdrawn. The newest of a chain stands. */
export interface MeasurementTable {
  id: Generated<number>
  /** Made by whoever sends it, so that sending it again changes nothing. */
  uid: string
  campaign_id: number
  candidate_id: number
  person_id: number
  event: 'measured' | 'withdrawn'
  kind: MeasurementKind
  /** Key of the view it was made on, such as `colour` or `band:g`; null of a withdrawal, like all that follows but `replaces`. */
  view: string | null
  /** Version of the recipe of the picture. */
  recipe_version: number | null
  /** Of that view. */
  pixel_scale_arcsec: number | null
  points: Generated<Json<OffsetArcsec[]>>
  /** What was found; its shape is that of lib/work/measuring/fitted.ts. */
  fitted: Json<unknown> | null
  einstein_radius_arcsec: number | null
  /** 1 sigma; null of a model set by hand. */
  error_arcsec: number | null
  lens_redshift: number | null
  lens_redshift_error: number | null
  lens_redshift_low: number | null
  lens_redshift_high: number | null
  lens_redshift_basis: RedshiftBasis | null
  source_redshift: number | null
  source_redshift_error: number | null
  source_redshift_low: number | null
  source_redshift_high: number | null
  source_redshift_basis: RedshiftBasis | null
  /** The cosmology that the masses and delays were worked out in. */
  cosmology: Json<unknown> | null
  /** Dispersion, mass and critical density with their intervals; null without both redshifts. */
  mass: Json<unknown> | null
  remark: string | null
  /** The person's own earlier one on this candidate that this takes the place of, or withdraws. */
  replaces: number | null
  at: IsoTime
}
export type Measurement = Selectable<MeasurementTable>
