import { sql, type Kysely } from 'kysely'
import { requireRule } from '@/db/queries/campaigns'
import { insertRun } from '@/db/queries/consensus'
import type { DB } from '@/db/schema'
import type { ReleaseAccess, ReleaseKind } from '@/db/schema/releases'
import { toJson } from '@/db/schema/values'
import { ruleOf } from '@/lib/work/campaigns/rule-in-force'
import { hashSecret } from '@/lib/work/people/secrets'

const NOW = '2026-02-03T04:05:06.000Z'

/**
 * A release with entries at these places, written straight into its tables, for tests and benchmarks of how it is read: entry 1 has
 * the key `SWS-1` and so on. It has its archive's row but no files.
 */
export async function addReleaseAt(
  db: Kysely<DB>,
  campaign: { id: number; acronym: string },
  personId: number,
  places: readonly (readonly [raDeg: number, decDeg: number])[],
  {
    number = 1,
    access = 'public' as ReleaseAccess,
    title = 'Lenses of the north field',
    kind = 'release' as ReleaseKind,
    correctsId = null as number | null,
    statement = null as string | null,
    /** Of a link. */
    token = 'a secret',
    /** SHA-256 of the one picture that each entry has. */
    picture = null as string | null,
    /** Without, the database must not ask for them: pragma foreign_keys = off. */
    candidates = true,
  } = {},
): Promise<number> {
  const rule = await requireRule(db, campaign.id)
  const summary = { candidates: 0, grades: 0, cannotJudge: 0, graders: 0, open: 0, split: 0, confirmed: 0, setAside: 0 }
  const agreement = { changed: 0, alphaOrdinal: null, alphaNote: null, fleissKappa: null, kappaNote: null }
  const run = await insertRun(db, {
    ...{ campaignId: campaign.id, ruleId: rule.id, inputDigest: 'test', newestGradeId: 0, newestCandidateId: 0 },
    ...{ startedBy: null, summary: { ...summary, ...agreement }, now: NOW },
  })
  const { id } = await db
    .insertInto('release')
    .values({
      ...{ campaign_id: campaign.id, number, kind, corrects_id: correctsId, statement, title },
      ...{ description: 'For tests.', authors: 'The Saltmarsh Collaboration', licence: 'CC-BY-4.0' },
      ...{ publisher: 'Saltmarsh Wide Survey', year: 2026, how_to_cite: 'Saltmarsh (2026).', software: 'Ringside' },
      ...{ campaign_name: 'North field', survey: 'Saltmarsh Wide Survey', acronym: campaign.acronym },
      rule: toJson<unknown>(ruleOf(rule)),
      cosmology: toJson({ model: 'flat LCDM' as const, hubbleConstant: 70, omegaMatter: 0.3 }),
      ...{ recipe_hash: null, run_id: run.id, newest_grade_id: 0, newest_candidate_id: 0, newest_left_out_id: 0 },
      ...{ newest_sheet_mark_id: 0, newest_ruling_id: 0, newest_merge_id: 0, newest_measurement_id: 0 },
      ...{ candidates: places.length, entries: places.length },
      ...{ created_by: personId, created_at: NOW },
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  const last = await sql<{ id: number }>`select coalesce(max(id), 0) as id from candidate`.execute(db)
  const before = last.rows[0].id
  for (let from = 0; from < places.length; from += 50_000) {
    const part = JSON.stringify(places.slice(from, from + 50_000))
    if (candidates) {
      await sql`insert into candidate (id, campaign_id, name, ra_deg, dec_deg, imaged_at, state_since, created_at)
        select ${before + from + 1} + key, ${campaign.id}, printf('R%d-%d', ${number}, ${from + 1} + key),
          json_extract(value, '$[0]'), json_extract(value, '$[1]'), ${NOW}, ${NOW}, ${NOW} from json_each(${part})`.execute(
        db,
      )
    }
    await sql`insert into release_entry (release_id, row_number, candidate_id, entry_key, designation, name, ra_deg, dec_deg, class,
        mean, spread, votes_a, votes_b, votes_c, votes_n, cannot_judge, decided_by, reason, known_as, n_measured, stamps, thumbnail)
      select ${id}, ${from + 1} + key, ${before + from + 1} + key, printf('SWS-%d', ${from + 1} + key),
        printf('SWS J%d', ${from + 1} + key), printf('R%d-%d', ${number}, ${from + 1} + key),
        json_extract(value, '$[0]'), json_extract(value, '$[1]'), substr('ABC', 1 + key % 3, 1), 3 - key % 3, 0, 4, 0, 0, 0, 0,
        'verdict', 'Four of four graders are sure.', '[]', 0, ${toJson(picture ? { colour: picture } : {})}, ${picture} from json_each(${part})`.execute(
      db,
    )
  }
  await db
    .insertInto('release_file')
    .values({ release_id: id, name: 'RELEASE.zip', media_type: 'application/zip', bytes: 0, sha256: '0'.repeat(64) })
    .execute()
  if (access !== 'private') {
    const tokenHash = access === 'link' ? hashSecret(token) : null
    const opened = { release_id: id, access, token_hash: tokenHash, changed_by: personId, changed_at: NOW }
    await db.insertInto('release_access').values(opened).execute()
  }
  return id
}
