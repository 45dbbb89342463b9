import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Estimate, RunModel } from '@/db/schema/consensus'
import { fromJson } from '@/db/schema/values'
import { GRADES, type Answer } from '@/lib/science/agreement/grades'
import { expectedInformationBits } from '@/lib/science/agreement/next-look'
import { decideByReliability } from '@/lib/science/agreement/reliability-rule'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'

const RULE = { method: 'reliability', gradesWanted: 5, leastGrades: 2, falseConfirmed: 0.05, missedLens: 0.2 } as const
const CANDIDATES = 12

let scenario: Scenario
let ids: number[]

beforeEach(async () => {
  scenario = await makeScenario(RULE, 6)
  ids = []
  for (let n = 0; n < CANDIDATES; n++) {
    ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS${n}`, { raDeg: 20 + n, decDeg: 1 }))
  }
})
afterEach(async () => {
  vi.restoreAllMocks()
  await scenario.db.destroy()
})

const give = async (grader: number, candidate: number, grade: Answer) =>
  recordGrade(
    scenario.db,
    await scenario.permit(scenario.graders[grader], 'grade'),
    ids[candidate],
    GradeInput.parse(grade === 'U' ? { grade, reason: 'too faint' } : { grade }),
  )
const run = async () => runConsensus(scenario.db, await scenario.permit(scenario.lead, 'lead'))
const estimates = () => scenario.db.selectFrom('estimate').selectAll().orderBy('candidate_id').execute()
const estimate = async (candidate: number) =>
  scenario.db.selectFrom('estimate').selectAll().where('candidate_id', '=', ids[candidate]).executeTakeFirst()
const want = async (candidate: number) =>
  scenario.db
    .selectFrom('candidate')
    .select(['settled', 'look_value'])
    .where('id', '=', ids[candidate])
    .executeTakeFirstOrThrow()

/** From the appended rows alone: every standing answer, the model of the estimate's run, the rule of that run. */
async function recomputed(): Promise<Estimate[]> {
  const { db } = scenario
  const rows = await db.selectFrom('grade').selectAll().where('occasion', '!=', 'repeat').orderBy('id').execute()
  const runRow = await db.selectFrom('run').selectAll().orderBy('id', 'desc').limit(1).executeTakeFirstOrThrow()
  const model = fromJson<RunModel>(runRow.model!)
  return ids.map((candidateId) => {
    const standing = new Map(rows.filter((row) => row.candidate_id === candidateId).map((row) => [row.person_id, row]))
    const answers = [...standing.values()]
      .filter((row) => !model.leftOut.includes(row.person_id))
      .map((row) => ({
        grade: row.grade,
        rates: model.graders.find(({ personId }) => personId === row.person_id) ?? model.newcomer,
        grader: '',
      }))
    const { outcome, evidence, probability, cannotJudge, weights } = decideByReliability(
      { ...RULE, mostLooks: RULE.gradesWanted },
      answers,
      model.lensShare,
    )
    return {
      candidate_id: candidateId,
      run_id: runRow.id,
      newest_grade_id: Math.max(0, ...[...standing.values()].map((row) => row.id)),
      grades: weights.length,
      cannot_judge: cannotJudge,
      evidence,
      probability,
      outcome,
    }
  })
}

describe('an estimate', () => {
  it('follows grades, corrections and runs, and can always be computed again from the appended rows', async () => {
    const random = new SeededRandom(5)
    await run()
    for (let step = 0; step < 60; step++) {
      const [grader, candidate] = [random.integer(0, 5), random.integer(0, CANDIDATES - 1)]
      const grade = ([...GRADES, 'U'] as const)[random.integer(0, 4)]
      await give(grader, candidate, grade).catch((error: { type?: string }) =>
        expect(error.type).toBe('candidate-full'),
      )
      if (step % 17 === 0) await run()
      expect(await estimates()).toEqual(await recomputed())
    }
    expect(new Set((await estimates()).map(({ outcome }) => outcome)).size).toBeGreaterThan(2)
  })

  it('is settled and worth no look once its grades decide it, and unsettled again by a correction', async () => {
    await run()
    expect((await want(0)).settled).toBe(0)
    await give(0, 0, 'A')
    await give(1, 0, 'A')
    expect(await estimate(0)).toMatchObject({ outcome: 'confirmed', grades: 2 })
    expect(await want(0)).toEqual({ settled: 1, look_value: 0 })
    // States change by a run or a ruling only.
    const state = () => scenario.db.selectFrom('candidate').select('state').where('id', '=', ids[0]).executeTakeFirst()
    expect(await state()).toEqual({ state: 'open' })
    await give(1, 0, 'N')
    expect(await estimate(0)).toMatchObject({ outcome: 'open', grades: 2 })
    expect((await want(0)).settled).toBe(0)
    expect((await want(0)).look_value).toBeGreaterThan(0)
    await give(1, 0, 'A')
    await run()
    expect(await state()).toEqual({ state: 'confirmed' })
  })

  it('is never settled by fewer than the least grades, nor by people who could not judge', async () => {
    await run()
    await give(0, 0, 'A')
    for (const grader of [1, 2]) await give(grader, 0, 'U')
    expect(await estimate(0)).toMatchObject({ outcome: 'open', grades: 1, cannot_judge: 2 })
    expect((await want(0)).settled).toBe(0)
  })

  it('weighs somebody whom the run did not know as a newcomer', async () => {
    await run()
    await give(3, 0, 'A')
    // Pseudo-counts of the model: an A is given to 4 of 10 lenses and to 0.5 of 10 that are none.
    expect((await estimate(0))?.evidence).toBeCloseTo(Math.log(0.4 / 0.05), 12)
  })

  it('tells the worth of a look in bits, under the mean rates of those who count', async () => {
    await give(0, 0, 'A')
    await run()
    const row = await scenario.db.selectFrom('run').select('model').executeTakeFirstOrThrow()
    const model = fromJson<RunModel>(row.model!)
    const { probability } = (await estimate(0))!
    expect((await want(0)).look_value).toBe(
      Number(expectedInformationBits(probability, model.graders[0]).toPrecision(3)),
    )
    expect((await want(1)).look_value).toBeGreaterThan(0)
  })

  it('is not there before the first run, nor of a calibration stamp, which is never settled', async () => {
    await give(0, 0, 'A')
    expect(await estimates()).toEqual([])
    await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', ids[1]).execute()
    await run()
    expect((await estimates()).map((row) => row.candidate_id)).not.toContain(ids[1])
    const unseen = (await want(2)).look_value
    for (const grader of [0, 1, 2]) await give(grader, 1, 'A')
    expect(await want(1)).toEqual({ settled: 0, look_value: unseen })
    expect(await estimate(1)).toBeUndefined()
  })

  it('waits for the run that applies a changed rule, and goes when that is the mean', async () => {
    const change = async (input: object) =>
      changeRule(scenario.db, await scenario.permit(scenario.lead, 'lead'), RuleInput.parse(input))
    await run()
    await give(0, 0, 'A')
    await change({ ...RULE, falseConfirmed: 0.4 })
    await give(1, 0, 'B')
    expect(await estimate(0)).toMatchObject({ grades: 1 })
    await run()
    expect(await estimate(0)).toMatchObject({ grades: 2, outcome: 'confirmed' })
    await change({ method: 'mean' })
    await run()
    expect(await estimates()).toEqual([])
    const left = await scenario.db
      .selectFrom('candidate')
      .select('id')
      .where((e) => e.or([e('settled', '=', 1), e('look_value', '>', 0)]))
      .execute()
    expect(left).toEqual([])
  })

  it('is completed by the next run where a run was killed before it had brought them all up to date', async () => {
    await give(0, 0, 'A')
    await run()
    const whole = await estimates()
    await scenario.db.deleteFrom('estimate').where('candidate_id', '>', ids[3]).execute()
    await scenario.db.updateTable('candidate').set({ look_value: 0 }).where('id', '>', ids[3]).execute()
    expect((await run()).unchanged).toBe(true)
    expect(await estimates()).toEqual(whole)
    expect((await want(5)).look_value).toBeGreaterThan(0)
  })
})
