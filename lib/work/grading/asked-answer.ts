import 'server-only'
import type { Transaction } from 'kysely'
import { findOpenAsk } from '@/db/queries/asked-looks'
import type { DB } from '@/db/schema'
import type { GradeRow } from '@/db/schema/grading'
import { conflict } from '@/lib/platform/problems/problem'

/**
 * The ask that a grade answers, or null for a first grade or a correction. Whoever has not graded the candidate answers an
 * open ask by any grade. Whoever has, says that they do, as the bench does: else a correction would pass for another look.
 * @throws Problem 409 `look-withdrawn` where the answer comes after the ask was withdrawn and an earlier grade stands.
 */
export async function askAnsweredBy(
  transaction: Transaction<DB>,
  candidateId: number,
  personId: number,
  { asked, standing }: { asked: boolean; standing: GradeRow | null },
): Promise<{ id: number } | null> {
  const ask = await findOpenAsk(transaction, candidateId, personId)
  if (ask && (asked || !standing)) return ask
  if (!ask && asked && standing?.occasion === 'first') {
    throw conflict(
      'look-withdrawn',
      'The look that you were asked for was withdrawn meanwhile, so this answer was not taken. Your earlier grade stands.',
    )
  }
  return null
}
