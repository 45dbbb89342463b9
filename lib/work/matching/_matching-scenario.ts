import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { toJson } from '@/db/schema/values'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { matchDue } from './match-candidates'

const NOW = '2026-01-01T00:00:00.000Z'
let lists = 0

/** A list in force with these objects, as if a lead had uploaded it. */
export async function addList(
  { db, campaign, lead }: Pick<Scenario, 'db' | 'campaign' | 'lead'>,
  objects: readonly { name?: string; raDeg: number | null; decDeg: number | null }[],
  { radiusArcsec = 2, keepsOutOfNew = true, name = 'Marsh lenses' } = {},
): Promise<number> {
  const { id } = await db
    .insertInto('reference_list')
    .values({
      campaign_id: campaign.id,
      name,
      source: 'Invented for tests',
      list_date: '2025',
      file_name: 'known.csv',
      format: 'csv',
      sha256: String(++lists).padStart(64, '0'),
      bytes: 100,
      mapping: toJson({
        ra: 'ra',
        dec: 'dec',
        raUnit: 'deg' as const,
        decUnit: 'deg' as const,
        frame: 'ICRS' as const,
        name: 'name',
        redshift: null,
        more: [],
        allTheSame: false,
      }),
      rows: objects.length,
      positions: objects.filter(({ raDeg }) => raDeg !== null).length,
      radius_arcsec: radiusArcsec,
      keeps_out_of_new: keepsOutOfNew ? 1 : 0,
      state: 'ready',
      reason: null,
      uploaded_by: lead.id,
      uploaded_at: NOW,
      state_since: NOW,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  for (let start = 0; start < objects.length; start += 500) {
    await db
      .insertInto('reference_object')
      .values(
        objects.slice(start, start + 500).map((object, index) => ({
          list_id: id,
          row_number: start + index + 1,
          name: object.name ?? `K${start + index + 1}`,
          ra_deg: object.raDeg,
          dec_deg: object.decDeg,
          redshift: null,
          more: null,
        })),
      )
      .execute()
  }
  return id
}

export const match = (db: Kysely<DB>, campaignId: number) => matchDue(db, campaignId, async () => {})

/** Candidates A, B, C within 1.5 arcsec of each other and D far away; matched, with a list of one object at A. */
export async function closeScenario() {
  const scenario = await makeScenario()
  const { db, campaign } = scenario
  const place = (eastArcsec: number) => ({ raDeg: 150 + eastArcsec / 3600, decDeg: 0 })
  const a = await addImagedCandidate(db, campaign, 'SWS A', place(0))
  const b = await addImagedCandidate(db, campaign, 'SWS B', place(0.7))
  const c = await addImagedCandidate(db, campaign, 'SWS C', place(1.4))
  const d = await addImagedCandidate(db, campaign, 'SWS D', place(500))
  const list = await addList(scenario, [{ name: 'Old ring', ...place(0.2) }])
  await match(db, campaign.id)
  return { ...scenario, a, b, c, d, list }
}
