import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter } from '../schema/grading'
import type { CandidateState } from '../schema/intake'
import { among, inCampaign } from './by-ids'
import { countedAnswers } from './consensus'

export interface CandidateForWhatIf {
  id: number
  state: CandidateState
  /** 1 where a ruling stands over verdicts */
  ruled: 0 | 1
}

/** A page of the campaign's candidates by id, calibration stamps among them. */
export async function listForWhatIf(
  db: Kysely<DB>,
  page: { campaignId: number; after: number; upTo: number; limit: number },
): Promise<CandidateForWhatIf[]> {
  return (
    db
      .selectFrom('candidate')
      .leftJoin('ruling', 'ruling.id', 'candidate.ruling_id')
      .select(['candidate.id', 'candidate.state'])
      .select(sql<0 | 1>`ruling.outcome is not null and ruling.outcome <> 'by verdict'`.as('ruled'))
      .where('candidate.id', '>', page.after)
      .where('candidate.id', '<=', page.upTo)
      // The plus keeps SQLite on the primary key: by an index on the campaign it would sort the whole campaign for each page.
      .where(inCampaign('candidate.campaign_id', page.campaignId))
      .orderBy('candidate.id')
      .limit(page.limit)
      .execute()
  )
}

export interface StampAnswer {
  candidateId: number
  personId: number
  grade: GradeLetter
}

/**
 * The answers that count at calibration stamps, by stamp in the order in which people gave them: a correction stands where the
 * answer was first given.
 */
export async function listStampAnswers(
  db: Kysely<DB>,
  bounds: { campaignId: number; newestGradeId: number; newestCandidateId: number },
): Promise<StampAnswer[]> {
  return countedAnswers(db, bounds.newestGradeId)
    .innerJoin('candidate', 'candidate.id', 'grade.candidate_id')
    .select(['grade.candidate_id as candidateId', 'grade.person_id as personId', 'grade.grade'])
    .where('candidate.campaign_id', '=', bounds.campaignId)
    .where('candidate.truth', 'is not', null)
    .where('candidate.id', '<=', bounds.newestCandidateId)
    .orderBy('grade.candidate_id')
    .orderBy(({ selectFrom }) =>
      selectFrom('grade as given')
        .select((e) => e.fn.min('given.id').as('id'))
        .whereRef('given.candidate_id', '=', 'grade.candidate_id')
        .whereRef('given.person_id', '=', 'grade.person_id')
        .where('given.occasion', 'in', ['first', 'asked']),
    )
    .execute()
}

/** Grades of the campaign that came after this one, corrections among them. */
export async function countGradesAfter(db: Kysely<DB>, campaignId: number, gradeId: number): Promise<number> {
  const row = await db
    .selectFrom('grade')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('id', '>', gradeId)
    .where(inCampaign('campaign_id', campaignId))
    .executeTakeFirstOrThrow()
  return row.n
}

/** Names of these candidates of the campaign; unknown ones are left out. */
export async function listNamesOf(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds: readonly number[],
): Promise<{ id: number; name: string }[]> {
  return db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where(inCampaign('campaign_id', campaignId))
    .where('id', 'in', among(candidateIds))
    .orderBy('id')
    .execute()
}
