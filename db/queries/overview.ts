import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Run } from '../schema/consensus'

/** Standing looks at imaged candidates, none counted above `gradesWanted`; without calibration candidates. */
export async function sumGradesGiven(db: Kysely<DB>, campaignId: number, gradesWanted: number): Promise<number> {
  const row = await db
    .selectFrom('candidate')
    .select(sql<number>`coalesce(sum(min(grades_given, ${gradesWanted})), 0)`.as('given'))
    .where('campaign_id', '=', campaignId)
    .where('truth', 'is', null)
    .where('imaged_at', 'is not', null)
    .executeTakeFirstOrThrow()
  return row.given
}

/**
 * Imaged candidates that still want looks and that this person has not looked at. Calibration candidates count too: nobody
 * may tell by the number which they are.
 */
export async function countLeftFor(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  gradesWanted: number,
): Promise<number> {
  const row = await db
    .selectFrom('candidate')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('imaged_at', 'is not', null)
    .where('grades_given', '<', gradesWanted)
    .where((e) =>
      e.not(
        e.exists(
          e
            .selectFrom('grade')
            .select('grade.id')
            .whereRef('grade.candidate_id', '=', 'candidate.id')
            .where('grade.occasion', '=', 'first')
            .where('grade.person_id', '=', personId),
        ),
      ),
    )
    .executeTakeFirstOrThrow()
  return row.n
}

/** Candidates that this person has looked at. */
export async function countLookedAtBy(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('grade')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', personId)
    .where('occasion', '=', 'first')
    .where('replaces', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

export async function findNewestRun(db: Kysely<DB>, campaignId: number): Promise<Run | null> {
  const row = await db
    .selectFrom('run')
    .selectAll()
    .where('campaign_id', '=', campaignId)
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

export async function countRefusedFiles(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('file')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('campaign_id', '=', campaignId)
    .where('fate', '=', 'refused')
    .where('replaced_by', 'is', null)
    .executeTakeFirstOrThrow()
  return row.n
}

/** Confirmed most recently; never a calibration candidate. */
export async function listNewestConfirmed(
  db: Kysely<DB>,
  campaignId: number,
  limit: number,
): Promise<{ id: number; name: string }[]> {
  return db
    .selectFrom('candidate')
    .select(['id', 'name'])
    .where('campaign_id', '=', campaignId)
    .where('state', '=', 'confirmed')
    .where('truth', 'is', null)
    .orderBy('state_since', 'desc')
    .orderBy('id', 'desc')
    .limit(limit)
    .execute()
}
