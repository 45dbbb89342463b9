import 'server-only'
import type { Kysely } from 'kysely'
import { listStandingAmong, type StandingRow } from '@/db/queries/measuring'
import type { DB } from '@/db/schema'
import type { MeasurementKind } from '@/db/schema/measuring'
import { combineRadii } from '@/lib/science/lensing/combine-measurements'

/** The measurements that stand of one candidate, combined: one of each person. */
export interface StandingRadius {
  einsteinRadiusArcsec: number
  /** of the combined radius, widened where people differ by more than their errors; null where nobody's is known */
  errorArcsec: number | null
  /** standard deviation between people; null for one */
  scatterArcsec: number | null
  /** people */
  count: number
  /** their pseudonyms, in the order of the measurements */
  by: string[]
  kinds: MeasurementKind[]
  measurementIds: number[]
  /** pseudonyms of those that lie apart from the others */
  apart: string[]
}

interface OnePersons {
  id: number
  personId: number
  errorArcsec: number | null
}

/**
 * One measurement of each person: the newest that has an error, since a model set by hand has none; else the newest.
 * @param rows oldest first
 */
export function onePerPerson<Row extends OnePersons>(rows: readonly Row[]): Row[] {
  const chosen = new Map<number, Row>()
  for (const row of rows) {
    const before = chosen.get(row.personId)
    if (!before || row.errorArcsec !== null || before.errorArcsec === null) chosen.set(row.personId, row)
  }
  return [...chosen.values()].sort((a, b) => a.id - b.id)
}

/**
 * For jobs that read what a release is of. Candidates without a measurement are not in the map; calibration candidates never are.
 * @param upTo id of the newest measurement there was; without, as it stands now
 */
export async function standingRadii(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
  options: { upTo?: number; decidedOnly?: boolean } = {},
): Promise<Map<number, StandingRadius>> {
  const groups = new Map<number, StandingRow[]>()
  for (const row of await listStandingAmong(db, campaignId, candidateIds, options)) {
    const group = groups.get(row.candidateId)
    if (group) group.push(row)
    else groups.set(row.candidateId, [row])
  }
  return new Map([...groups].map(([id, rows]) => [id, combined(onePerPerson(rows))]))
}

function combined(rows: readonly StandingRow[]): StandingRadius {
  const by = rows.map(({ pseudonym }) => pseudonym ?? 'a former member')
  const radius = combineRadii(
    rows.map(({ einsteinRadiusArcsec, errorArcsec }) => ({ radiusArcsec: einsteinRadiusArcsec, errorArcsec })),
  )
  if (!radius) throw new Error('No measurement to combine.')
  return {
    einsteinRadiusArcsec: radius.radiusArcsec,
    errorArcsec: radius.errorArcsec,
    scatterArcsec: radius.scatterArcsec,
    count: radius.count,
    by,
    kinds: rows.map(({ kind }) => kind),
    measurementIds: rows.map(({ id }) => id),
    apart: radius.apart.map((place) => by[place]),
  }
}
