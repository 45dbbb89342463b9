import 'server-only'
import type { Transaction } from 'kysely'
import { findAskOf, findOpenAsk } from '@/db/queries/asked-looks'
import type { DB } from '@/db/schema'
import type { GradeRow } from '@/db/schema/grading'
import { conflict } from '@/lib/platform/problems/problem'

/**
 * The ask that a grade answers, or null for a first grade or a correction. Whoever has not graded the candidate answers an
 * open ask by any grade. Whoever has, says which ask they answer, as the bench does: else a correction would pass for another look.
 * One that names an ask answered before corrects.
 * @param asked the id of an ask; true: the newest
 * @throws Problem 409 `look-withdrawn` where the answer comes after the ask was withdrawn and an earlier grade stands.
 */
export async function askAnsweredBy(
  transaction: Transaction<DB>,
  candidateId: number,
  personId: number,
  { asked, standing }: { asked: number | boolean; standing: GradeRow | null },
): Promise<{ id: number } | null> {
  if (!standing) return findOpenAsk(transaction, candidateId, personId)
  if (asked === false) return null
  const ask = await findAskOf(transaction, candidateId, personId, asked === true ? 'newest' : asked)
  if (!ask || ask.withdrawn) {
    throw conflict(
      'look-withdrawn',
      'The look that you were asked for was withdrawn meanwhile, so this answer was not taken. Your earlier grade stands.',
    )
  }
  return ask.answered ? null : { id: ask.id }
}
