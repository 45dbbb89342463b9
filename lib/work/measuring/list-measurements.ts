import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidate } from '@/db/queries/candidates'
import { listMeasurementsOf, type MeasurementWithName } from '@/db/queries/measuring'
import type { DB } from '@/db/schema'
import type { Json } from '@/db/schema/values'
import { fromJson } from '@/db/schema/values'
import { combineRadii } from '@/lib/science/lensing/combine-measurements'
import type { Cosmology } from '@/lib/science/lensing/cosmology'
import type { EinsteinMass } from '@/lib/science/lensing/einstein-mass'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { cosmologyOf } from '@/lib/work/campaigns/cosmology-of'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import { knownLabels } from '@/lib/work/matching/known-labels'
import { roleMay, type CampaignPermit } from '@/lib/work/people/permission'
import type { Fitted } from './fitted'
import type { CombinedShown, CandidateMeasurements, MeasurementShown } from './measurement-shown'
import type { UsedRedshift } from './redshift-choice'
import { onePerPerson } from './standing-radii'

/**
 * The measurements of a candidate for its page; null before the reader may see what others made of it. Leads and viewers see all. A
 * grader sees others' once the candidate is decided, and their own before: an open candidate looks as a calibration stamp
 * does, of which nothing is ever decided and on which people measure alone.
 */
export async function listMeasurements(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<CandidateMeasurements | null> {
  const { campaign, viewer, role } = permit
  const candidate = await findCandidate(db, campaign.id, candidateId)
  if (!candidate || (candidate.truth !== null && !candidateScope(permit).withCalibration)) return null
  if (!(await revealedTo(db, permit, [candidateId])).has(candidateId)) return null
  await noteShown(db, permit, [candidateId])
  const alone = role === 'grader' && candidate.state === 'open'
  const rows = (await listMeasurementsOf(db, candidateId)).filter(({ person_id }) => !alone || person_id === viewer.id)
  const measured = rows.filter(({ event }) => event === 'measured')
  const shown = measured.map((row) => shownOf(row, rows, { viewerId: viewer.id, named: role === 'lead' }))
  const standing = measured.filter(({ stands }) => stands === 1)
  const byId = new Map(shown.map((one) => [one.id, one]))
  return {
    standing: standing.map(({ id }) => byId.get(id)!),
    earlier: shown.filter(({ stands, own }) => !stands && (own || role === 'lead')).reverse(),
    combined: combinedOf(standing, byId),
    mayMeasure: roleMay(role, 'grade'),
    alone,
    cosmology: cosmologyOf(campaign),
    lensRedshift: candidate.lens_redshift,
    sourceRedshift: candidate.source_redshift,
    knownRedshifts: await knownRedshifts(db, permit, candidateId),
  }
}

async function knownRedshifts(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<CandidateMeasurements['knownRedshifts']> {
  const labels = (await knownLabels(db, permit, [candidateId])).get(candidateId) ?? []
  return labels.flatMap(({ name, redshift }) => (redshift !== null && redshift > 0 ? [{ name, redshift }] : []))
}

function shownOf(
  row: MeasurementWithName,
  rows: readonly MeasurementWithName[],
  { viewerId, named }: { viewerId: number; named: boolean },
): MeasurementShown {
  const later = rows.find(({ replaces }) => replaces === row.id)
  return {
    id: row.id,
    by: named ? row.name : (row.pseudonym ?? 'a former member'),
    own: row.person_id === viewerId,
    kind: row.kind,
    at: row.at,
    stands: row.stands === 1,
    endedBy: later ? { withdrawn: later.event === 'withdrawn', at: later.at } : null,
    view: row.view ?? '',
    pixelScaleArcsec: row.pixel_scale_arcsec ?? 0,
    points: fromJson(row.points),
    fitted: fromJson(row.fitted as Json<Fitted>),
    einsteinRadiusArcsec: row.einstein_radius_arcsec ?? 0,
    errorArcsec: row.error_arcsec,
    lens: usedOf(row, 'lens'),
    source: usedOf(row, 'source'),
    cosmology: fromJson(row.cosmology as Json<Cosmology>),
    mass: row.mass === null ? null : fromJson(row.mass as Json<EinsteinMass>),
    remark: row.remark,
  }
}

function usedOf(row: MeasurementWithName, of: 'lens' | 'source'): UsedRedshift | null {
  const [value, basis] = [row[`${of}_redshift`], row[`${of}_redshift_basis`]]
  if (value === null || basis === null) return null
  const [error, low, high] = [row[`${of}_redshift_error`], row[`${of}_redshift_low`], row[`${of}_redshift_high`]]
  return { basis, value, error, low, high }
}

function combinedOf(
  standing: readonly MeasurementWithName[],
  byId: ReadonlyMap<number, MeasurementShown>,
): CombinedShown | null {
  const chosen = onePerPerson(
    standing.map(({ id, person_id, error_arcsec }) => ({ id, personId: person_id, errorArcsec: error_arcsec })),
  ).flatMap(({ id }) => byId.get(id) ?? [])
  const radius = combineRadii(
    chosen.map(({ einsteinRadiusArcsec, errorArcsec }) => ({ radiusArcsec: einsteinRadiusArcsec, errorArcsec })),
  )
  if (!radius) return null
  return { ...radius, measurementIds: chosen.map(({ id }) => id), apartIds: radius.apart.map((k) => chosen[k].id) }
}
