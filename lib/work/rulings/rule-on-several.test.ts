import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { decisionRows, giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { parseGroupForm, parseUndoForm, writeCases } from './group-input'
import { listSplitCases } from './list-splits'
import { ruleOnCandidate } from './rule-on-candidate'
import { ruleOnSeveral } from './rule-on-several'

const RULE = { gradesWanted: 4, leastGrades: 3, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }
const REASON = 'Edge-on discs, all of them.'
let scenario: Scenario
let ids: number[]
beforeEach(async () => {
  scenario = await makeScenario(RULE)
  ids = []
  for (const [name, letters] of Object.entries({ one: 'AANN', two: 'NANA', three: 'ANNN', four: 'AAAN' })) {
    const id = await addImagedCandidate(scenario.db, scenario.campaign, name)
    await giveGrades(scenario.db, scenario.campaign, id, scenario.graders, letters)
    ids.push(id)
  }
  await runConsensus(scenario.db, await lead())
})
afterEach(() => scenario.db.destroy())

const lead = () => scenario.permit(scenario.lead, 'lead')
const cases = (some: number[], lastRulingSeen: number | null = null) =>
  some.map((candidateId) => ({ candidateId, lastRulingSeen }))
const states = async () =>
  (await scenario.db.selectFrom('candidate').select('state').orderBy('id').execute()).map(({ state }) => state)
const form = (fields: Record<string, string>) => {
  const data = new FormData()
  for (const [name, value] of Object.entries(fields)) data.set(name, value)
  return data
}

describe('one ruling on several candidates', () => {
  it('settles each with the same reason and a ruling of its own, and tells what came of each', async () => {
    const input = { cases: cases(ids.slice(0, 2)), outcome: 'set aside' as const, grade: null, reason: REASON }
    const { ruled, refused } = await ruleOnSeveral(scenario.db, await lead(), input)
    expect(refused).toEqual([])
    expect(ruled).toMatchObject([
      { name: 'one', state: 'set aside' },
      { name: 'two', state: 'set aside' },
    ])
    expect(await states()).toEqual(['set aside', 'set aside', 'split', 'split'])
    const rulings = await scenario.db.selectFrom('ruling').select(['candidate_id', 'reason']).execute()
    expect(rulings).toEqual(ids.slice(0, 2).map((id) => ({ candidate_id: id, reason: REASON })))
  })

  it('is undone as a group: by verdict again, but not where somebody has ruled since', async () => {
    const permit = await lead()
    const { ruled } = await ruleOnSeveral(scenario.db, permit, {
      cases: cases(ids.slice(0, 3)),
      outcome: 'confirmed',
      grade: 'C',
      reason: REASON,
    })
    await ruleOnCandidate(scenario.db, permit, ids[1], { outcome: 'set aside', grade: null, reason: 'No.' })
    const seen = ruled.map(({ candidateId, rulingId }) => ({ candidateId, lastRulingSeen: rulingId }))
    const undo = await ruleOnSeveral(scenario.db, permit, parseUndoForm(form({ cases: writeCases(seen) })))
    expect(undo.ruled.map(({ name, state }) => [name, state])).toEqual([
      ['one', 'split'],
      ['three', 'split'],
    ])
    expect(undo.refused).toMatchObject([{ name: 'two', reason: expect.stringContaining('avocet has ruled on two') }])
    expect(await states()).toEqual(['split', 'set aside', 'split', 'split'])
  })

  it('leaves out, with the reason, what another lead has ruled meanwhile, a calibration stamp, and what is not here', async () => {
    const { db, campaign, otherCampaign } = scenario
    await ruleOnCandidate(db, await lead(), ids[0], { outcome: 'confirmed', grade: 'A', reason: 'A ring.' })
    const known = await addImagedCandidate(db, campaign, 'known')
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', known).execute()
    const there = await addImagedCandidate(db, otherCampaign, 'there')
    const before = await decisionRows(db)
    const input = { outcome: 'set aside' as const, grade: null, reason: REASON }
    const none = await ruleOnSeveral(db, await lead(), { ...input, cases: cases([ids[0], known, there]) })
    expect(none.ruled).toEqual([])
    expect(none.refused.map(({ name }) => name)).toEqual(['one', 'known', 'a candidate that is not here'])
    expect(none.refused[0].reason).toMatch(/avocet has ruled on one meanwhile/)
    expect(await decisionRows(db)).toEqual(before)
    const mixed = await ruleOnSeveral(db, await lead(), { ...input, cases: cases([ids[0], ids[1]]) })
    expect([mixed.ruled.length, mixed.refused.length]).toEqual([1, 1])
    expect(await states()).toEqual(['confirmed', 'set aside', 'split', 'split', 'open', 'open'])
  })

  it('takes a permit to lead, which nobody else gets', async () => {
    await expect(scenario.permit(scenario.graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
  })
})

describe('the form for several', () => {
  it('reads each candidate with the ruling that was seen, once each', () => {
    const read = parseGroupForm(form({ cases: '3:,4:7,3:', choice: 'confirmed-B', reason: ' arcs ' }))
    expect(read).toEqual({
      cases: [
        { candidateId: 3, lastRulingSeen: null },
        { candidateId: 4, lastRulingSeen: 7 },
      ],
      outcome: 'confirmed',
      grade: 'B',
      reason: 'arcs',
    })
  })

  it('is refused without candidates, without a choice and without a reason', () => {
    expect(() => parseGroupForm(form({ cases: '', choice: 'open', reason: 'x' }))).toThrow(/Choose what to rule on/)
    expect(() => parseGroupForm(form({ cases: '3:', reason: ' ' }))).toThrow(/Choose what to rule\./)
    expect(() => parseGroupForm(form({ cases: '3:', reason: ' ' }))).toThrow(/Give a reason/)
    expect(() => parseUndoForm(form({ cases: 'x' }))).toThrow(/Choose what to rule on/)
    const many = Array.from({ length: 201 }, (_, id) => `${id + 1}:`).join(',')
    expect(() => parseUndoForm(form({ cases: many }))).toThrow(/at most 200/)
  })
})

describe('the order of splits', () => {
  const names = async (order?: 'worth' | 'mean' | 'spread' | 'waiting' | 'name') =>
    (await listSplitCases(scenario.db, await lead(), order)).cases.map(({ name }) => name)

  it('by worth has first those whose mean lies deepest between the thresholds, then the wider spread', async () => {
    // Means 1.5, 1.5, 0.75, 2.25 between thresholds 1 and 2: depths 0.5, 0.5, -0.25, -0.25; the last two spread alike.
    expect(await names()).toEqual(['one', 'two', 'three', 'four'])
    expect((await listSplitCases(scenario.db, await lead())).cases.map(({ worth }) => worth)).toEqual([
      '0.50 from a threshold',
      '0.50 from a threshold',
      'split by spread alone',
      'split by spread alone',
    ])
  })

  it('can be by mean, by spread, by name and by how long they wait', async () => {
    expect(await names('mean')).toEqual(['four', 'one', 'two', 'three'])
    expect((await names('spread')).slice(0, 2)).toEqual(['one', 'two'])
    expect(await names('name')).toEqual(['four', 'one', 'three', 'two'])
    await scenario.db.updateTable('candidate').set({ state_since: '2020-01-01' }).where('id', '=', ids[2]).execute()
    expect((await names('waiting'))[0]).toBe('three')
  })

  it('by reliability has first those whose probability of a lens is nearest to a half', async () => {
    const { db, campaign } = scenario
    const run = await db.selectFrom('run').select('id').executeTakeFirstOrThrow()
    await db
      .insertInto('rule')
      .values({
        campaign_id: campaign.id,
        version: 2,
        method: 'reliability',
        grades_wanted: 6,
        least_grades: 2,
        parameters: JSON.stringify({ falseConfirmed: 0.001, missedLens: 0.05 }),
        created_by: scenario.lead.id,
        created_at: '2026-01-03',
      })
      .execute()
    for (const [index, probability] of [0.9, 0.45, 0.2, null].entries()) {
      if (probability === null) continue
      const estimate = { run_id: run.id, newest_grade_id: 0, grades: 4, cannot_judge: 0, evidence: 0 }
      await db
        .insertInto('estimate')
        .values({ ...estimate, candidate_id: ids[index], probability, outcome: 'split' })
        .execute()
    }
    expect(await names()).toEqual(['two', 'three', 'one', 'four'])
    const { cases: listed, method } = await listSplitCases(db, await lead())
    expect(method).toBe('reliability')
    // H(0.45) = 0.9928, H(0.2) = 0.7219, H(0.9) = 0.4690 bits.
    expect(listed.map(({ worth }) => worth)).toEqual([
      'worth 0.99 bit',
      'worth 0.72 bit',
      'worth 0.47 bit',
      'no probability yet',
    ])
  })
})
