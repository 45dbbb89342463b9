import { sql, type Insertable, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Measurement, MeasurementKind, MeasurementTable } from '../schema/measuring'
import { among, inCampaign } from './by-ids'

export async function findMeasurementByUid(db: Kysely<DB>, uid: string): Promise<Measurement | null> {
  return (await db.selectFrom('measurement').selectAll().where('uid', '=', uid).executeTakeFirst()) ?? null
}

export async function insertMeasurement(
  db: Kysely<DB>,
  row: Insertable<MeasurementTable>,
): Promise<{ id: number; at: string }> {
  return db.insertInto('measurement').values(row).returning(['id', 'at']).executeTakeFirstOrThrow()
}

export interface MeasurementWithName extends Measurement {
  name: string
  /** null for a person who is no member and never was. */
  pseudonym: string | null
  /** Nothing replaces or withdraws it. */
  stands: 0 | 1
}

/** Everything that was ever measured on a candidate, oldest first; withdrawals are rows like others. */
export async function listMeasurementsOf(db: Kysely<DB>, candidateId: number): Promise<MeasurementWithName[]> {
  return db
    .selectFrom('measurement')
    .innerJoin('person', 'person.id', 'measurement.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'measurement.person_id')
        .onRef('membership.campaign_id', '=', 'measurement.campaign_id'),
    )
    .selectAll('measurement')
    .select(['person.name', 'membership.pseudonym'])
    .select(
      sql<0 | 1>`measurement.event = 'measured' and not exists
        (select 1 from measurement later where later.replaces = measurement.id)`.as('stands'),
    )
    .where('measurement.candidate_id', '=', candidateId)
    .orderBy('measurement.id')
    .execute()
}

/** What stands of one person on one candidate, oldest first. */
export async function listStandingOf(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
): Promise<{ id: number; kind: MeasurementKind }[]> {
  return db
    .selectFrom('measurement')
    .select(['id', 'kind'])
    .where('candidate_id', '=', candidateId)
    .where(sql<boolean>`+person_id = ${personId}`)
    .where('event', '=', 'measured')
    .where(sql<boolean>`not exists (select 1 from measurement later where later.replaces = measurement.id)`)
    .orderBy('id')
    .execute()
}

export interface StandingRow {
  id: number
  candidateId: number
  personId: number
  pseudonym: string | null
  kind: MeasurementKind
  einsteinRadiusArcsec: number
  errorArcsec: number | null
}

/**
 * What stands on these candidates, oldest first; nothing of calibration candidates, whose measurements never leave.
 * @param upTo as it stood when that was the newest row of the table; without, as it stands now
 * @param decidedOnly leaves out candidates that are open
 */
export async function listStandingAmong(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
  { upTo = Number.MAX_SAFE_INTEGER, decidedOnly = false }: { upTo?: number; decidedOnly?: boolean } = {},
): Promise<StandingRow[]> {
  if (candidateIds.length === 0) return []
  return db
    .selectFrom('measurement')
    .innerJoin('candidate', 'candidate.id', 'measurement.candidate_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'measurement.person_id')
        .onRef('membership.campaign_id', '=', 'measurement.campaign_id'),
    )
    .select([
      'measurement.id',
      'measurement.candidate_id as candidateId',
      'measurement.person_id as personId',
      'membership.pseudonym',
      'measurement.kind',
      'measurement.error_arcsec as errorArcsec',
    ])
    .select(sql<number>`measurement.einstein_radius_arcsec`.as('einsteinRadiusArcsec'))
    .where('measurement.candidate_id', 'in', among(candidateIds))
    .where(inCampaign('measurement.campaign_id', campaignId))
    .where('candidate.truth', 'is', null)
    .where('measurement.event', '=', 'measured')
    .where('measurement.id', '<=', upTo)
    .$if(decidedOnly, (query) => query.where('candidate.state', '!=', 'open'))
    .where(
      sql<boolean>`not exists
        (select 1 from measurement later where later.replaces = measurement.id and later.id <= ${upTo})`,
    )
    .orderBy('measurement.id')
    .execute()
}
