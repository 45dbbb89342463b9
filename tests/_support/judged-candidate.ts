import { insertRun, insertVerdicts } from '@/db/queries/consensus'
import type { GradeLetter } from '@/db/schema/grading'
import type { CandidateState } from '@/db/schema/intake'
import { toJson } from '@/db/schema/values'
import { decide } from '@/lib/science/agreement/mean-rule'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import { applyVerdicts } from '@/lib/work/consensus/apply-state'
import { addImagedCandidate, type Scenario } from './scenario'

export interface Judged {
  /** One letter a grader, in the order of the scenario's graders; a blank passes one over. */
  grades: string
  position?: { raDeg: number; decDeg: number }
  remark?: string | null
  tags?: string[]
}

const NOW = '2026-02-03T04:05:06.000Z'

/** Appends first grades, one letter a grader. */
export async function giveGrades(
  { db, campaign, graders }: Scenario,
  candidateId: number,
  { grades, remark, tags = [] }: Omit<Judged, 'position'>,
): Promise<void> {
  for (const [index, letter] of [...grades].entries()) {
    if (letter === ' ') continue
    await db
      .insertInto('grade')
      .values({
        uid: `${candidateId}-${index}`,
        campaign_id: campaign.id,
        candidate_id: candidateId,
        person_id: graders[index].id,
        occasion: 'first',
        grade: letter as GradeLetter,
        tags: toJson(tags),
        reason: letter === 'U' ? 'artefact' : null,
        remark: remark ?? null,
        recipe_id: null,
        view: null,
        seconds: null,
        replaces: null,
        given_at: NOW,
      })
      .execute()
  }
}

/** A candidate with grades, the verdict of the rule in force, and the state that follows from it. */
export async function addJudgedCandidate(scenario: Scenario, name: string, judged: Judged): Promise<number> {
  const { db, campaign } = scenario
  const id = await addImagedCandidate(db, campaign, name, judged.position)
  await giveGrades(scenario, id, judged)
  const rule = await ruleInForce(db, campaign.id)
  if (rule.method !== 'mean') throw new Error('A judged candidate is judged by the mean method.')
  const answers = [...judged.grades]
    .filter((letter) => letter !== ' ')
    .map((grade) => ({ grade: grade as GradeLetter }))
  const { n, ...decision } = decide(rule, answers)
  await db.transaction().execute(async (transaction) => {
    const run = await insertRun(transaction, {
      campaignId: campaign.id,
      ruleId: rule.id,
      inputDigest: 'none',
      newestGradeId: 0,
      newestCandidateId: 0,
      summary: {} as never,
      startedBy: null,
      now: NOW,
    })
    const ids = await insertVerdicts(transaction, run.id, [
      { candidateId: id, grades: n, ...decision, probability: null },
    ])
    const state: CandidateState = decision.outcome
    await applyVerdicts(
      transaction,
      campaign,
      [{ candidateId: id, state, restsOn: { cause: 'verdict', id: ids.get(id)! } }],
      NOW,
    )
  })
  return id
}

/** A calibration candidate, which graders meet among the others. */
export async function addCalibrationCandidate({ db, campaign }: Scenario, name: string): Promise<number> {
  const id = await addImagedCandidate(db, campaign, name)
  await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', id).execute()
  return id
}
