import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Transaction } from 'kysely'
import { findGradeByUid, insertGrade, isJudgementShown } from '@/db/queries/grading'
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
 * @throws Problem 409 `no-repeat` where the candidate has not come back to this person, or not turned like this; `judgement-seen`;
 *   `grade-id-taken`.
 */
export async function recordRepeat(
  transaction: Transaction<DB>,
  { campaign, viewer, role }: CampaignPermit<'grade'>,
  candidateId: number,
  input: GradeInput,
  { recipeId, delivered }: { recipeId: number; delivered: boolean },
): Promise<{ row: GradeRow; replaced: string | null }> {
  const look = await findRepeatLook(transaction, candidateId, viewer.id)
  if (!look || look.turned !== input.turned) {
    throw conflict(
      'no-repeat',
      'This candidate has not come back to you turned, so this answer was not taken. Your earlier grade stands.',
    )
  }
  const standing = await findRepeatAnswer(transaction, candidateId, viewer.id)
  if (standing && (standing.uid === input.id || saysTheSame(standing, input))) return { row: standing, replaced: null }
  if (delivered) {
    // An earlier answer of the same look that has been corrected since stands corrected; any other grade's id is not this one's.
    const known = input.id ? await findGradeByUid(transaction, input.id) : null
    if (standing && known?.occasion === 'repeat') return { row: standing, replaced: null }
    throw conflict('grade-id-taken', 'This grade id belongs to another grade. Make a new id for each grade.')
  }
  if (role === 'grader' && (await isJudgementShown(transaction, candidateId, viewer.id))) {
    throw conflict(
      'judgement-seen',
      "You have seen the others' grades of this candidate since, so looking again says nothing of your own constancy. Your earlier grade stands.",
    )
  }
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
