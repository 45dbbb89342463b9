import 'server-only'
import type { Kysely } from 'kysely'
import { listAnswersOf } from '@/db/queries/verdicts'
import { findEstimateOf, findRunOfVerdict } from '@/db/queries/rulings'
import type { DB } from '@/db/schema'
import type { RunModel } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import { isGrade } from '@/lib/science/agreement/grades'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { explainReliability, type ReliabilityWhy, type WeighedBy, type WhySince } from './explain-reliability'
import { verdictChanges } from './verdict-changes'

interface Reader {
  id: number
  /** Leads read names, everybody else pseudonyms. */
  named: boolean
  /** Graders see nobody's numbers but their own. */
  onlyOwn: boolean
}

/**
 * Why the verdict is as it is, from the model and the answers of the run that gave it; null by the mean method. What has come
 * since is the live estimate: it is told apart, because only a run or a ruling changes a state. A grader is told neither where one
 * other grade is all there is beside their own, nor what came since: the difference would be that person's number.
 */
export async function findWhy(
  db: Kysely<DB>,
  candidateId: number,
  verdict: { id: number; rule: RuleInForce; probability: number | null },
  reader: Reader,
): Promise<ReliabilityWhy | null> {
  if (verdict.rule.method !== 'reliability') return null
  const run = await findRunOfVerdict(db, verdict.id)
  if (!run?.model) return null
  const model = fromJson(run.model)
  const rows = await listAnswersOf(db, candidateId, { upTo: run.newestGradeId })
  const answers = rows.map((row): WeighedBy => {
    const grader = model.graders.find(({ personId }) => personId === row.personId)
    return {
      by: (reader.named ? row.name : row.pseudonym) ?? 'a member',
      own: row.personId === reader.id,
      grade: row.grade,
      rates: grader ?? model.newcomer,
      learnedFrom: grader?.grades ?? 0,
      calibration: grader?.calibrationGrades ?? 0,
      leftOut: model.leftOut.includes(row.personId),
    }
  })
  const basis = { rule: verdict.rule, lensShare: model.lensShare }
  const counted = answers.filter(({ leftOut }) => !leftOut).map(({ by, ...answer }) => ({ ...answer, grader: by }))
  if (reader.onlyOwn && counted.filter(({ own, grade }) => !own && isGrade(grade)).length === 1) return null
  return {
    ...explainReliability({ ...basis, answers }, reader),
    changes: verdictChanges({ ...basis, answers: counted }, model.newcomer, (at) => !reader.onlyOwn || counted[at].own),
    since: reader.onlyOwn ? null : await sinceRun(db, candidateId, run, model),
  }
}

async function sinceRun(
  db: Kysely<DB>,
  candidateId: number,
  run: { id: number; newestGradeId: number },
  { leftOut }: RunModel,
): Promise<WhySince | null> {
  const estimate = await findEstimateOf(db, candidateId)
  if (!estimate) return null
  const newer = (await listAnswersOf(db, candidateId)).filter(
    ({ id, personId }) => id > run.newestGradeId && !leftOut.includes(personId),
  )
  const newRun = estimate.run_id !== run.id
  if (newer.length === 0 && !newRun) return null
  return { newGrades: newer.length, newRun, probability: estimate.probability, outcome: estimate.outcome }
}
