/** Measurements as a candidate's page shows them. */
import type { MeasurementKind, OffsetArcsec } from '@/db/schema/measuring'
import type { IsoTime } from '@/db/schema/values'
import type { CombinedRadius } from '@/lib/science/lensing/combine-measurements'
import type { Cosmology } from '@/lib/science/lensing/cosmology'
import type { EinsteinMass } from '@/lib/science/lensing/einstein-mass'
import type { Fitted } from './fitted'
import type { UsedRedshift } from './redshift-choice'

export interface MeasurementShown {
  id: number
  /** The name for leads, the pseudonym for everybody else. */
  by: string
  own: boolean
  kind: MeasurementKind
  at: IsoTime
  stands: boolean
  /** null while it stands */
  endedBy: { withdrawn: boolean; at: IsoTime } | null
  /** Key of the view that it was made on. */
  view: string
  pixelScaleArcsec: number
  points: OffsetArcsec[]
  fitted: Fitted
  einsteinRadiusArcsec: number
  errorArcsec: number | null
  lens: UsedRedshift | null
  source: UsedRedshift | null
  /** In which its masses and delays were worked out. */
  cosmology: Cosmology
  mass: EinsteinMass | null
  remark: string | null
}

export type CombinedShown = CombinedRadius & { measurementIds: number[]; apartIds: number[] }

export interface CandidateMeasurements {
  /** oldest first */
  standing: MeasurementShown[]
  /** Replaced and withdrawn, newest first: a reader's own, and for leads everybody's. */
  earlier: MeasurementShown[]
  combined: CombinedShown | null
  mayMeasure: boolean
  /** Others' are shown once the candidate is decided. */
  alone: boolean
  /** The campaign's, for new measurements. */
  cosmology: Cosmology
  /** The candidate's own. */
  lensRedshift: number | null
  sourceRedshift: number | null
  /** Of known objects at its place, nearest first: offered for the lens, and taken over by nobody unasked. */
  knownRedshifts: { name: string; redshift: number }[]
}
