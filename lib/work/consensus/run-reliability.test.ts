import { afterEach, describe, expect, it } from 'vitest'
import { insertLeftOut } from '@/db/queries/left-out'
import type { Run, RunModel } from '@/db/schema/consensus'
import type { GradeLetter } from '@/db/schema/grading'
import { fromJson } from '@/db/schema/values'
import { fitDawidSkene } from '@/lib/science/agreement/dawid-skene'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { groupByCandidate } from '@/lib/science/agreement/grade-table'
import { GRADES } from '@/lib/science/agreement/grades'
import { LENS, LENS_MODEL, NOT_A_LENS, ratesOfGraders } from '@/lib/science/agreement/lens-model'
import { decideByReliability } from '@/lib/science/agreement/reliability-rule'
import { simulateSearch } from '@/lib/science/agreement/simulated-search'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { ruleOf } from '@/lib/work/campaigns/rule-in-force'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { decisionRows, giveGrade } from './_give-grade'
import { computeRun } from './compute-run'
import { runConsensus } from './run-consensus'

const RULE = { method: 'reliability', gradesWanted: 6, leastGrades: 2, falseConfirmed: 0.02, missedLens: 0.1 } as const
const GRADERS = 6
const SEARCH = simulateSearch({
  candidates: 60,
  lensShare: 0.2,
  pool: 'mixed',
  graders: GRADERS,
  calibrationStamps: 8,
  seed: 7,
})

let open: Scenario[] = []
afterEach(async () => {
  await Promise.all(open.map(({ db }) => db.destroy()))
  open = []
})

interface Made extends Scenario {
  ids: number[]
}

/** A simulated search; grader g looks at stamp i where (i + g) % 3 is not 0. Grades come in the order of the candidates or backwards. */
async function makeSearch(backwards = false): Promise<Made> {
  const scenario = await makeScenario(RULE, GRADERS)
  open.push(scenario)
  const { db, campaign, graders } = scenario
  const ids: number[] = []
  for (let stamp = 0; stamp < SEARCH.isLens.length; stamp++) {
    ids.push(await addImagedCandidate(db, campaign, `SWS${stamp}`, { raDeg: 10 + stamp, decDeg: 3 }))
    if (stamp < SEARCH.scenario.candidates) continue
    const truth = SEARCH.isLens[stamp] ? 'lens' : 'not a lens'
    await db.updateTable('candidate').set({ truth }).where('id', '=', ids[stamp]).execute()
  }
  const looks = ids.flatMap((id, stamp) => looksAt(stamp).map(({ grader, grade }) => ({ id, grader, grade })))
  for (const { id, grader, grade } of backwards ? looks.reverse() : looks) {
    await giveGrade(db, campaign, id, graders[grader], grade)
  }
  return { ...scenario, ids }
}

function looksAt(stamp: number): { grader: number; grade: GradeLetter }[] {
  return Array.from({ length: GRADERS }, (_, grader) => grader)
    .filter((grader) => (stamp + grader) % 3 !== 0)
    .map((grader) => ({ grader, grade: GRADES[SEARCH.says[stamp * GRADERS + grader]] }))
}

const run = async (made: Scenario) => runConsensus(made.db, await made.permit(made.lead, 'lead'))
const newestRun = ({ db }: Scenario): Promise<Run> =>
  db.selectFrom('run').selectAll().orderBy('id', 'desc').limit(1).executeTakeFirstOrThrow()
const modelOf = async (made: Scenario): Promise<RunModel> => fromJson((await newestRun(made)).model!)
const verdicts = ({ db }: Scenario) =>
  db
    .selectFrom('verdict')
    .select(['candidate_id', 'outcome', 'grades', 'cannot_judge', 'mean', 'spread', 'probability', 'reason'])
    .orderBy('id')
    .execute()
const leave = ({ db, campaign, lead }: Scenario, personId: number, leftOut: boolean) =>
  insertLeftOut(db, {
    campaignId: campaign.id,
    personId,
    leftOut,
    reason: 'asleep',
    decidedBy: lead.id,
    now: '2026-02-01T00:00:00.000Z',
  })

describe('a run by the reliability method', () => {
  it('gives the verdicts that the fit of the same grades gives, calibration stamps held to their truth', async () => {
    const made = await makeSearch()
    await run(made)
    const stamps = SEARCH.isLens.length
    const entries = made.ids.flatMap((_, stamp) => looksAt(stamp).map((look) => ({ stamp, ...look })))
    const fit = fitDawidSkene(
      groupByCandidate({
        candidates: stamps,
        graders: GRADERS,
        grades: 4,
        candidateOf: Int32Array.from(entries, ({ stamp }) => stamp),
        graderOf: Int32Array.from(entries, ({ grader }) => grader),
        gradeOf: Uint8Array.from(entries, ({ grade }) => GRADES.indexOf(grade as 'A')),
      }),
      {
        ...LENS_MODEL,
        truth: Array.from({ length: stamps }, (_, stamp) =>
          stamp < SEARCH.scenario.candidates ? UNKNOWN_TRUTH : SEARCH.isLens[stamp] ? LENS : NOT_A_LENS,
        ),
      },
    )
    const model = await modelOf(made)
    expect(model).toMatchObject({ iterations: fit.iterations, converged: true, leftOut: [] })
    // One candidate of the prior, 2 %, is in the share.
    const { candidates } = SEARCH.scenario
    expect(model.lensShare).toBeCloseTo((candidates * fit.classShares[LENS] + 0.02) / (candidates + 1), 12)
    const rates = ratesOfGraders(fit)
    for (const [grader, { personId, lens, notLens, grades, calibrationGrades }] of model.graders.entries()) {
      expect(personId).toBe(made.graders[grader].id)
      lens.forEach((rate, grade) => expect(rate).toBeCloseTo(rates[grader].lens[grade], 12))
      notLens.forEach((rate, grade) => expect(rate).toBeCloseTo(rates[grader].notLens[grade], 12))
      const own = entries.filter((entry) => entry.grader === grader)
      expect(grades).toBe(own.length)
      expect(calibrationGrades).toBe(own.filter(({ stamp }) => stamp >= SEARCH.scenario.candidates).length)
    }
    const rows = await verdicts(made)
    expect(rows).toHaveLength(SEARCH.scenario.candidates)
    const rule = { ...RULE, mostLooks: RULE.gradesWanted }
    for (const [stamp, row] of rows.entries()) {
      const answers = looksAt(stamp).map(({ grader, grade }) => ({
        grade,
        rates: model.graders[grader],
        grader: `G${String(grader + 2).padStart(2, '0')}`,
      }))
      const { outcome, probability, reason, mean } = decideByReliability(rule, answers, model.lensShare)
      expect(row).toMatchObject({ candidate_id: made.ids[stamp], outcome, reason, mean })
      expect(row.probability).toBeCloseTo(probability, 14)
      expect(row.probability).toBeCloseTo(fit.posterior[stamp * 2 + LENS], 1)
    }
    expect(new Set(rows.map((row) => row.outcome)).size).toBeGreaterThan(2)
  })

  it('is the same, byte for byte, whatever the order in which the same grades came in', async () => {
    const [one, other] = [await makeSearch(), await makeSearch(true)]
    await run(one)
    await run(other)
    const [a, b] = [await newestRun(one), await newestRun(other)]
    expect(b.input_digest).toBe(a.input_digest)
    expect(b.model).toBe(a.model)
    expect(b.summary).toBe(a.summary)
    expect(JSON.stringify(await verdicts(other))).toBe(JSON.stringify(await verdicts(one)))
  })

  it('writes nothing when it runs again without a new grade', async () => {
    const made = await makeSearch()
    const first = await run(made)
    const rows = await decisionRows(made.db)
    const estimates = await made.db.selectFrom('estimate').selectAll().execute()
    expect(await run(made)).toEqual({ ...first, unchanged: true })
    expect(await decisionRows(made.db)).toEqual(rows)
    expect(await made.db.selectFrom('estimate').selectAll().execute()).toEqual(estimates)
  })

  it('can be computed again from what it noted, after more grades and another decision on who is left out', async () => {
    const made = await makeSearch()
    const { db, campaign, graders, ids } = made
    await leave(made, graders[1].id, true)
    await run(made)
    const stored = await newestRun(made)
    await leave(made, graders[1].id, false)
    await giveGrade(db, campaign, ids[0], graders[0], 'A')
    const rule = ruleOf(await db.selectFrom('rule').selectAll().orderBy('id').executeTakeFirstOrThrow())
    const again = await computeRun(db, {
      campaignId: campaign.id,
      rule,
      newestGradeId: stored.newest_grade_id,
      newestCandidateId: stored.newest_candidate_id,
      newestLeftOutId: stored.newest_left_out_id,
    })
    expect(again.inputDigest).toBe(stored.input_digest)
    expect(JSON.stringify(again.model)).toBe(stored.model)
    expect(again.changed).toEqual([])
  })

  it('names graders in reasons by pseudonym only', async () => {
    const made = await makeSearch()
    await run(made)
    const reasons = (await verdicts(made)).map((row) => row.reason).join(' ')
    expect(reasons).toMatch(/of G02 speaks/)
    for (const { name } of made.graders) expect(reasons).not.toContain(name)
  })

  it('never judges a calibration stamp, and learns from its truth', async () => {
    const made = await makeSearch()
    const { db, ids } = made
    const stamps = ids.slice(SEARCH.scenario.candidates)
    await run(made)
    const before = await newestRun(made)
    for (const table of ['verdict', 'estimate', 'state_change'] as const) {
      expect(await db.selectFrom(table).selectAll().where('candidate_id', 'in', stamps).execute()).toEqual([])
    }
    const { truth } = await db
      .selectFrom('candidate')
      .select('truth')
      .where('id', '=', stamps[0])
      .executeTakeFirstOrThrow()
    const turned = truth === 'lens' ? 'not a lens' : 'lens'
    await db.updateTable('candidate').set({ truth: turned }).where('id', '=', stamps[0]).execute()
    await run(made)
    const after = await newestRun(made)
    expect(after.input_digest).not.toBe(before.input_digest)
    expect(after.model).not.toBe(before.model)
  })

  it('counts each person once: corrections in place of the first, repeats never, U as a look that weighs nothing', async () => {
    const made = await makeSearch()
    const { db, campaign, graders, ids } = made
    await run(made)
    const id = ids[0]
    const first = await db.selectFrom('grade').selectAll().where('candidate_id', '=', id).executeTakeFirstOrThrow()
    await giveGrade(db, campaign, id, { id: first.person_id }, 'U', { replaces: first.id })
    await giveGrade(db, campaign, id, graders[2], 'A', { occasion: 'repeat' })
    await run(made)
    const [, newest] = await db.selectFrom('verdict').selectAll().where('candidate_id', '=', id).orderBy('id').execute()
    expect(newest).toMatchObject({ grades: looksAt(0).length - 1, cannot_judge: 1 })
    expect(newest.reason).toMatch(/1 look could not judge/)
  })
})

describe('a grader who is left out', () => {
  it('counts in nothing until counted again, which brings the first verdicts back', async () => {
    const made = await makeSearch()
    const { db, graders } = made
    await run(made)
    const outcomes = async () =>
      (await db.selectFrom('candidate').select(['id', 'state']).where('truth', 'is', null).execute())
        .map(({ id, state }) => `${id} ${state}`)
        .join()
    const before = { states: await outcomes(), model: (await newestRun(made)).model }
    await leave(made, graders[0].id, true)
    const without = await run(made)
    expect(without.unchanged).toBe(false)
    expect(without.summary.graders).toBe(GRADERS - 1)
    const model = await modelOf(made)
    expect(model.leftOut).toEqual([graders[0].id])
    expect(model.graders.map(({ personId }) => personId)).not.toContain(graders[0].id)
    const newest = await db
      .selectFrom('verdict')
      .innerJoin('candidate', 'candidate.verdict_id', 'verdict.id')
      .select('verdict.reason')
      .execute()
    expect(newest.map((row) => row.reason).join(' ')).not.toContain('G02')
    await leave(made, graders[0].id, false)
    await run(made)
    expect((await newestRun(made)).model).toBe(before.model)
    expect(await outcomes()).toBe(before.states)
  })

  it('counts in nothing under the mean method either', async () => {
    const scenario = await makeScenario({ gradesWanted: 4, leastGrades: 2, splitSpread: 1.5 })
    open.push(scenario)
    const { db, campaign, graders } = scenario
    const id = await addImagedCandidate(db, campaign, 'one')
    for (const [at, letter] of (['N', 'A', 'A'] as const).entries())
      await giveGrade(db, campaign, id, graders[at], letter)
    await run(scenario)
    await leave(scenario, graders[0].id, true)
    await run(scenario)
    const rows = await verdicts(scenario)
    expect(rows.map(({ grades, mean, outcome }) => ({ grades, mean, outcome }))).toEqual([
      { grades: 3, mean: 2, outcome: 'confirmed' },
      { grades: 2, mean: 3, outcome: 'confirmed' },
    ])
  })
})

describe('a verdict by reliability', () => {
  it('is written anew for a new answer or a new rule, and not because the rates moved a little', async () => {
    const made = await makeSearch()
    const { db, campaign, graders, ids } = made
    await run(made)
    const sure = await db
      .selectFrom('verdict')
      .selectAll()
      .where('outcome', '=', 'set aside')
      .where('probability', '<', 0.0005)
      .executeTakeFirstOrThrow()
    await giveGrade(db, campaign, ids[1], graders[GRADERS - 1], 'A')
    await run(made)
    const of = (candidateId: number) =>
      db.selectFrom('verdict').select('id').where('candidate_id', '=', candidateId).execute()
    expect(await of(sure.candidate_id)).toHaveLength(1)
    expect(await of(ids[1])).toHaveLength(2)
    await changeRule(db, await made.permit(made.lead, 'lead'), RuleInput.parse({ ...RULE, missedLens: 0.05 }))
    await run(made)
    expect(await of(sure.candidate_id)).toHaveLength(2)
  })
})
