import 'server-only'
import type { Kysely } from 'kysely'
import { findRunPace, wantsAnyLook } from '@/db/queries/grading'
import type { DB } from '@/db/schema'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'

/** Grades of one moment are judged by one run. */
const SOON_MS = 2_000
/** No state waits longer than this for its run. */
const LONGEST_MS = 600_000
/** A run reads every grade, in some 12 microseconds each: so it takes about a thousandth of the time. */
const PAUSE_MS_A_GRADE = 12
/** New grades, as a share of those of the newest run, after which a run does not wait. */
const NOTABLE_GROWTH = 0.05

/**
 * How long after this grade the consensus should run, in milliseconds. At once (grades of two seconds together) before the first
 * run, when the grades have grown by a twentieth, and when no candidate wants another look; else when the pause since the newest
 * run is over, which is longer in larger campaigns and never longer than ten minutes. Growth is told by the ids of grades, those of
 * other campaigns counted with it: at worst a run comes too early.
 */
export async function consensusDelayMs(
  db: Kysely<DB>,
  campaignId: number,
  rule: RuleInForce,
  grade: { id: number; given_at: string },
): Promise<number> {
  const run = await findRunPace(db, campaignId)
  if (!run || run.ruleId !== rule.id || grade.id - run.newestGradeId >= NOTABLE_GROWTH * run.grades) return SOON_MS
  const pause = Math.min(LONGEST_MS, run.grades * PAUSE_MS_A_GRADE)
  const left = pause - (Date.parse(grade.given_at) - Date.parse(run.at))
  if (left <= SOON_MS) return SOON_MS
  const untilSettled = rule.method === 'reliability'
  return (await wantsAnyLook(db, campaignId, rule.gradesWanted, untilSettled)) ? left : SOON_MS
}
