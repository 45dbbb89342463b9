import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Transaction } from 'kysely'
import { insertGrade } from '@/db/queries/grading'
import type { DB } from '@/db/schema'
import type { GradeRow } from '@/db/schema/grading'
import { toJson } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { GradeInput } from './grade-input'

/**
 * A grade that came when its candidate had all its looks, as after hours without a network, or a correction of it. It is kept for
 * the person and the leads and counts nowhere: it takes no place, moves no estimate and asks for no run.
 */
export async function recordLate(
  transaction: Transaction<DB>,
  { campaign, viewer }: CampaignPermit<'grade'>,
  candidateId: number,
  input: GradeInput,
  { recipeId, corrected }: { recipeId: number; corrected: GradeRow | null },
): Promise<{ row: GradeRow; replaced: string | null }> {
  const row = await insertGrade(transaction, {
    uid: input.id ?? randomUUID(),
    campaign_id: campaign.id,
    candidate_id: candidateId,
    person_id: viewer.id,
    occasion: 'late',
    grade: input.grade,
    tags: toJson<string[]>(input.tags),
    reason: input.reason,
    remark: input.remark,
    recipe_id: recipeId,
    view: input.view,
    seconds: input.seconds,
    replaces: corrected?.id ?? null,
    given_at: isoTime(),
  })
  return { row, replaced: corrected?.uid ?? null }
}
