import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Transaction } from 'kysely'
import { insertGrade } from '@/db/queries/grading'
import { findRepeatAnswer, findRepeatLook, setRepeatAnswered } from '@/db/queries/repeats'
import type { DB } from '@/db/schema'
import type { GradeRow } from '@/db/schema/grading'
import { toJson } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { conflict } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { GradeInput } from './grade-input'

/**
 * The answer to an own candidate that came back turned, or a correction of that answer. It says how far a person agrees with
 * themselves and counts nowhere else: it takes no place, moves no estimate and asks for no run.
 * @throws Problem 409 `no-repeat` where the candidate has not come back to this person.
 */
export async function recordRepeat(
  transaction: Transaction<DB>,
  { campaign, viewer }: CampaignPermit<'grade'>,
  candidateId: number,
  input: GradeInput,
  { recipeId, delivered }: { recipeId: number; delivered: boolean },
): Promise<{ row: GradeRow; replaced: string | null }> {
  const look = await findRepeatLook(transaction, candidateId, viewer.id)
  if (!look) {
    throw conflict(
      'no-repeat',
      'This candidate has not come back to you turned, so this answer was not taken. Your earlier grade stands.',
    )
  }
  const standing = await findRepeatAnswer(transaction, candidateId, viewer.id)
  if (standing && (delivered || saysTheSame(standing, input))) return { row: standing, replaced: null }
  const row = await insertGrade(transaction, {
    uid: input.id ?? randomUUID(),
    campaign_id: campaign.id,
    candidate_id: candidateId,
    person_id: viewer.id,
    occasion: 'repeat',
    grade: input.grade,
    tags: toJson<string[]>(input.tags),
    reason: input.reason,
    remark: input.remark,
    recipe_id: recipeId,
    view: input.view,
    seconds: input.seconds,
    replaces: standing?.id ?? null,
    given_at: isoTime(),
  })
  await setRepeatAnswered(transaction, look.id, row.id)
  return { row, replaced: standing?.uid ?? null }
}

const saysTheSame = (standing: GradeRow, input: GradeInput): boolean =>
  standing.grade === input.grade &&
  standing.remark === input.remark &&
  standing.reason === input.reason &&
  standing.tags === toJson<string[]>(input.tags)
