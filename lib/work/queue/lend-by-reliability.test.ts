import { CompiledQuery, type Kysely } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { listNextByLead } from '@/db/queries/queue'
import { listInSpread, listOpenBuckets, walkBucket, type WalkOrder } from '@/db/queries/queue-walk'
import type { DB } from '@/db/schema'
import type { Answer } from '@/lib/science/agreement/grades'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveBack } from './give-back'
import { lendNext } from './lend-next'

const RULE = { method: 'reliability', gradesWanted: 4, leastGrades: 2, falseConfirmed: 0.05, missedLens: 0.2 } as const

let scenario: Scenario
let ids: number[]

beforeEach(async () => {
  scenario = await makeScenario(RULE, 6)
  ids = []
  for (let n = 0; n < 5; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS${n}`))
})
afterEach(() => scenario.db.destroy())

const permit = (grader: number) => scenario.permit(scenario.graders[grader], 'grade')
const lead = () => scenario.permit(scenario.lead, 'lead')
const run = async () => runConsensus(scenario.db, await lead())
/** What the grader would get, without holding it. */
async function offered(grader: number, count = 10): Promise<number[]> {
  const { candidates } = await lendNext(scenario.db, await permit(grader), count)
  await giveBack(scenario.db, await permit(grader))
  return candidates.map(({ id }) => ids.indexOf(id))
}
const give = async (grader: number, candidate: number, grade: Answer) =>
  recordGrade(scenario.db, await permit(grader), ids[candidate], GradeInput.parse({ grade }))

describe('the queue under the reliability method', () => {
  it('serves everything before the first run, in order', async () => {
    expect(await offered(0)).toEqual([0, 1, 2, 3, 4])
  })

  it('serves first where a look tells most, and no more what is settled', async () => {
    await run()
    await give(0, 3, 'A')
    await give(0, 2, 'N')
    await give(1, 2, 'N')
    expect(await offered(5)).toEqual([3, 0, 1, 4])
    await give(1, 3, 'A')
    expect(await offered(5)).toEqual([0, 1, 4])
  })

  it('serves a candidate again that a correction or a later run has unsettled', async () => {
    await run()
    await give(0, 2, 'N')
    await give(1, 2, 'N')
    expect(await offered(5)).not.toContain(2)
    await give(1, 2, 'A')
    expect(await offered(5)).toContain(2)
    await give(1, 2, 'N')
    await changeRule(scenario.db, await lead(), RuleInput.parse({ ...RULE, missedLens: 0.001 }))
    await run()
    expect(await offered(5)).toContain(2)
  })

  it('takes a settled candidate off the bench of who holds it, and takes their grade all the same', async () => {
    await run()
    const bench = async () => (await lendNext(scenario.db, await permit(5), 5)).candidates.map(({ id }) => id)
    expect(await bench()).toContain(ids[0])
    await give(0, 0, 'N')
    await give(1, 0, 'N')
    expect(await bench()).not.toContain(ids[0])
    expect((await give(5, 0, 'C')).grade.grade).toBe('C')
  })

  it('never gives more than the most looks, however undecided', async () => {
    await run()
    for (const [grader, grade] of (['A', 'N', 'A', 'N'] as const).entries()) await give(grader, 0, grade)
    expect(await offered(5)).not.toContain(0)
    await expect(give(5, 0, 'A')).rejects.toMatchObject({ type: 'candidate-full' })
  })

  it('leaves calibration stamps to be mixed in, whatever the model makes of them', async () => {
    await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', ids[2]).execute()
    await scenario.db.updateTable('campaign').set({ calibration_share: 0 }).execute()
    await run()
    for (const grader of [0, 1, 2]) await give(grader, 2, 'A')
    await run()
    expect(await offered(5)).toEqual([0, 1, 3, 4])
    await give(3, 2, 'A')
    expect(await offered(5)).toEqual([0, 1, 3, 4])
  })

  it('serves a settled candidate that a lead has reopened, first, for one more look', async () => {
    await run()
    await give(0, 4, 'N')
    await give(1, 4, 'N')
    expect(await offered(5)).not.toContain(4)
    await ruleOnCandidate(scenario.db, await lead(), ids[4], { outcome: 'open', grade: null, reason: 'look again' })
    expect(await offered(5)).toEqual([4, 0, 1, 2, 3])
    await give(2, 4, 'N')
    expect(await offered(5)).not.toContain(4)
  })

  it('prefers what nobody else has on the bench', async () => {
    await run()
    await lendNext(scenario.db, await permit(0), 2)
    expect(await offered(1)).toEqual([2, 3, 4, 0, 1])
  })

  it('counts what is left without what is settled', async () => {
    await run()
    await give(0, 2, 'N')
    await give(1, 2, 'N')
    expect(await lendNext(scenario.db, await permit(5), 1)).toMatchObject({ left: 4, given: 0 })
  })

  it('tells a grader nothing of estimates', async () => {
    await run()
    await give(0, 3, 'A')
    const text = JSON.stringify(await lendNext(scenario.db, await permit(5), 5))
    expect(text).not.toMatch(/evidence|probability|settled|value|outcome|heldByOthers/i)
  })
})

/** What SQLite does for the statements that this makes. */
async function plansOf(ask: (db: Kysely<DB>) => Promise<unknown>): Promise<string[]> {
  const statements: CompiledQuery[] = []
  const watched = scenario.db.withPlugin({
    transformQuery: ({ node, queryId }) => {
      statements.push(scenario.db.getExecutor().compileQuery(node, queryId))
      return node
    },
    transformResult: async ({ result }) => result,
  })
  await ask(watched)
  const steps = await Promise.all(
    statements.map(({ sql, parameters }) =>
      scenario.db.executeQuery<{ detail: string }>(CompiledQuery.raw(`explain query plan ${sql}`, [...parameters])),
    ),
  )
  return steps.flatMap(({ rows }) => rows.map(({ detail }) => detail))
}

describe('what it serves is found', () => {
  const asker = {
    campaignId: 1,
    personId: 2,
    gradesWanted: 4,
    untilSettled: true,
    usesSheet: false,
    now: '2026-01-01T00:00:00.000Z',
  }
  const bucket = { gradesGiven: 1, firstPass: 'sent on', open: 9, size: 9 } as const
  const from = { key: 0.5, spread: 3 }
  const along = (order: WalkOrder) => (db: Kysely<DB>) =>
    walkBucket(db, asker, { bucket, order, from, limit: 10, most: null })

  it.each([
    ['the most informative', 'candidate_queue_look (campaign_id=? AND grades_given=? AND', along('look')],
    ['the highest score', 'candidate_queue_score (campaign_id=? AND grades_given=? AND', along('score')],
    ['what is nearest to its number', 'candidate_queue (campaign_id=? AND grades_given=? AND', along('number')],
    [
      'a part in random order',
      'candidate_queue_shuffled (<expr>=? AND spread>? AND spread<?',
      (db: Kysely<DB>) => listInSpread(db, asker, { from: 0, to: 9 }),
    ],
    ['what a lead reopened', 'candidate_asked (campaign_id=?', (db: Kysely<DB>) => listNextByLead(db, asker, 10)],
    ['how many are open', 'PRIMARY KEY (campaign_id=? AND person_id=?', (db: Kysely<DB>) => listOpenBuckets(db, asker)],
  ] as const)('by an index, without a look at the rest of the campaign: %s', async (_, index, list) => {
    const plans = await plansOf(list)
    expect(plans.join('\n')).toContain(index)
    expect(plans.filter((step) => step.startsWith('SCAN') && !/^SCAN candidate$/.test(step))).toEqual([])
  })

  it.each(['look', 'score', 'number'] as const)('in order, so that nothing is sorted: by %s', async (order) => {
    expect((await plansOf(along(order))).join()).not.toMatch(/TEMP B-TREE/)
  })
})
