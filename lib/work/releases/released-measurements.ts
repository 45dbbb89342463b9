import 'server-only'
import type { Kysely } from 'kysely'
import { listMeasurementsToRelease } from '@/db/queries/release-beside'
import { listReleaseEntries, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { groupBy } from '@/lib/work/intake/group-by'
import { onePerPerson } from '@/lib/work/measuring/standing-radii'
import { releasedMeasurement, type ReleasedMeasurement } from './measurement-columns'
import { PAGE } from './read-frozen'

/** What stood of the entries when the release was frozen, in the order of the catalogue. */
export async function* releasedMeasurements(
  db: Kysely<DB>,
  release: ReleaseRow,
): AsyncGenerator<ReleasedMeasurement, void, void> {
  const bounds = { campaignId: release.campaign_id, upTo: release.newest_measurement_id }
  for (let after = 0; ; await giveWay()) {
    const entries = await listReleaseEntries(db, release.id, { after, limit: PAGE })
    const ids = entries.map((entry) => entry.candidate_id)
    const rows = groupBy(await listMeasurementsToRelease(db, bounds, ids), (row) => String(row.candidate_id))
    for (const { candidate_id: id, entry_key: entry, name } of entries) {
      const own = rows.get(String(id)) ?? []
      const people = own.map((row) => ({ ...row, personId: row.person_id, errorArcsec: row.error_arcsec }))
      const used = new Set(onePerPerson(people).map((row) => row.id))
      for (const row of own) {
        const by = row.pseudonym ?? 'a former member'
        yield releasedMeasurement(row, { entry, name, by, used: used.has(row.id) })
      }
    }
    if (entries.length < PAGE) return
    after = entries[entries.length - 1].row_number
  }
}
