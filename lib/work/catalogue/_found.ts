import { sql } from 'kysely'
import type { Scenario } from '@/tests/_support/scenario'

/** An Einstein radius that somebody has measured. */
export async function measure(
  { db, campaign, graders }: Scenario,
  candidateId: number,
  radiusArcsec: number,
): Promise<void> {
  await sql`insert into measurement
      (uid, campaign_id, candidate_id, person_id, event, kind, view, fitted, einstein_radius_arcsec, error_arcsec, cosmology, at)
    values (${`measured-${candidateId}`}, ${campaign.id}, ${candidateId}, ${graders[1].id}, 'measured', 'circle', 'colour', '{}',
      ${radiusArcsec}, 0.1, '{}', '2026-01-01T00:00:00.000Z')`.execute(db)
}

/** The object of a list at the very place of the candidate. */
export async function addKnown(
  { db, campaign, lead }: Scenario,
  candidateId: number,
  list: { keepsOut: boolean; decision?: 'different' },
): Promise<void> {
  const at = '2026-01-01T00:00:00.000Z'
  const { id } = await db
    .insertInto('reference_list')
    .values({
      campaign_id: campaign.id,
      name: `List for ${candidateId}`,
      source: 'a paper',
      list_date: '2026-01-01',
      file_name: 'list.csv',
      format: 'csv',
      sha256: String(candidateId).padStart(64, '0'),
      bytes: 1,
      mapping: '{}',
      radius_arcsec: 2,
      keeps_out_of_new: list.keepsOut ? 1 : 0,
      state: 'ready',
      reason: null,
      uploaded_by: lead.id,
      uploaded_at: at,
      state_since: at,
    } as never)
    .returning('id')
    .executeTakeFirstOrThrow()
  await db
    .insertInto('reference_object')
    .values({ list_id: id, row_number: 1, name: 'RS 1', ra_deg: 1, dec_deg: 1, redshift: null, more: null })
    .execute()
  await db
    .insertInto('object_match')
    .values({ candidate_id: candidateId, list_id: id, row_number: 1, separation_arcsec: 0.5 })
    .execute()
  if (!list.decision) return
  await db
    .insertInto('match_decision')
    .values({
      campaign_id: campaign.id,
      candidate_id: candidateId,
      other_id: null,
      list_id: id,
      row_number: 1,
      decision: list.decision,
      reason: 'another galaxy',
      person_id: lead.id,
      created_at: at,
    })
    .execute()
}
