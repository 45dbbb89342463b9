import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import type { GradeLetter, GradeRow } from '@/db/schema/grading'
import { toJson } from '@/db/schema/values'

let number = 0

/** For tests: one grade row as the grading room writes it. */
export async function giveGrade(
  db: Kysely<DB>,
  campaign: { id: number },
  candidateId: number,
  person: { id: number },
  grade: GradeLetter,
  more: Partial<Pick<GradeRow, 'occasion' | 'replaces' | 'remark' | 'tags' | 'seconds'>> = {},
): Promise<number> {
  number += 1
  const row = await db
    .insertInto('grade')
    .values({
      uid: `test-${number}`,
      campaign_id: campaign.id,
      candidate_id: candidateId,
      person_id: person.id,
      occasion: 'first',
      grade,
      tags: toJson([]),
      reason: null,
      remark: null,
      recipe_id: null,
      view: null,
      seconds: null,
      replaces: null,
      given_at: '2026-01-02T00:00:00.000Z',
      ...more,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return row.id
}

/** One letter a grader, in their order: 'AABN'. */
export async function giveGrades(
  db: Kysely<DB>,
  campaign: { id: number },
  candidateId: number,
  graders: readonly { id: number }[],
  letters: string,
): Promise<void> {
  for (const [index, letter] of [...letters].entries()) {
    await giveGrade(db, campaign, candidateId, graders[index], letter as GradeLetter)
  }
}

/** Every row that a consensus run or a ruling can write, to see that nothing was. */
export async function decisionRows(db: Kysely<DB>): Promise<unknown> {
  const tables = [
    'run',
    'verdict',
    'ruling',
    'state_change',
    'designation',
    'entry',
    'candidate',
    'audit_event',
  ] as const
  return Promise.all(tables.map((table) => db.selectFrom(table).selectAll().execute()))
}
