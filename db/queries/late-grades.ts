import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import { asEvidence, type EvidenceAnswer } from './verdicts'

/**
 * Standing answers that came when the candidate had all its looks, in order of their ids.
 * @param by of this person only
 */
export async function listLateAnswersOf(
  db: Kysely<DB>,
  candidateId: number,
  by: number | null,
): Promise<EvidenceAnswer[]> {
  return asEvidence(db.selectFrom('grade'))
    .where('grade.candidate_id', '=', candidateId)
    .where('grade.occasion', '=', 'late')
    .where(sql<boolean>`not exists (select 1 from grade later where later.replaces = grade.id)`)
    .$if(by !== null, (query) => query.where('grade.person_id', '=', by))
    .execute()
}

/** Looks of a person that came late, corrections left out. */
export async function countLateLooks(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('look_count')
    .select('n')
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('occasion', '=', 'late')
    .executeTakeFirst()
  return row?.n ?? 0
}
