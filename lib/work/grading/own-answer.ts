import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidateToGrade, findLateAnswer, findStandingAnswer, isJudgementShown } from '@/db/queries/grading'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import { fromJson } from '@/db/schema/values'
import { notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

export interface OwnAnswer {
  /** The person's own answer that stands; null where there is none. */
  answer: { id: string; grade: GradeLetter; tags: string[]; reason: string | null; remark: string | null } | null
  /** Whether a correction would be taken: a grader who has been shown the others' judgement keeps theirs. */
  open: boolean
}

/**
 * What stands of this person's own at the candidate, for a bench that looks back after a reload. Nothing of anybody else.
 * @throws Problem 404 not of this campaign.
 */
export async function ownAnswer(
  db: Kysely<DB>,
  { campaign, viewer, role }: CampaignPermit<'grade'>,
  candidateId: number,
): Promise<OwnAnswer> {
  if (!(await findCandidateToGrade(db, campaign.id, candidateId))) throw notFound('candidate')
  const row =
    (await findStandingAnswer(db, candidateId, viewer.id)) ?? (await findLateAnswer(db, candidateId, viewer.id))
  const open = role !== 'grader' || !(await isJudgementShown(db, candidateId, viewer.id))
  if (!row) return { answer: null, open }
  const { uid: id, grade, reason, remark } = row
  return { answer: { id, grade, tags: fromJson(row.tags), reason, remark }, open }
}
