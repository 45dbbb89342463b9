import { beforeEach, describe, expect, it, vi } from 'vitest'
import { OUTCOMES } from '@/lib/science/agreement/outcomes-at-once'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { insertLeftOut } from '@/db/queries/left-out'
import type * as WhatIfQueries from '@/db/queries/what-if'
import { changeRule } from '@/lib/work/campaigns/change-settings'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { decisionRows, giveGrade, giveGrades } from './_give-grade'
import { runConsensus } from './run-consensus'
import { tryRule } from './try-rule'
import { makeRule, readWhatIf, showCandidates } from './what-if'
import { withProbabilities } from './what-if-columns'

const between = vi.hoisted(() => ({ readings: [] as (() => Promise<unknown>)[] }))

vi.mock('@/db/queries/what-if', async (original) => {
  const queries = await original<typeof WhatIfQueries>()
  const listForWhatIf: typeof queries.listForWhatIf = async (db, page) => {
    await between.readings.shift()?.()
    return queries.listForWhatIf(db, page)
  }
  return { ...queries, listForWhatIf }
})

let scenario: Scenario
let ids: number[]

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 2 })
  const { db, campaign, graders } = scenario
  ids = []
  for (const name of ['one', 'two', 'three', 'stamp', 'other stamp', 'four']) {
    ids.push(await addImagedCandidate(db, campaign, name))
  }
  await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', ids[3]).execute()
  await db.updateTable('candidate').set({ truth: 'not a lens' }).where('id', '=', ids[4]).execute()
  for (const [at, letters] of ['AAB', 'NNU', 'ANAN', 'AB', 'NN', ''].entries()) {
    await giveGrades(db, campaign, ids[at], graders, letters)
  }
})

const lead = () => scenario.permit(scenario.lead, 'lead')

describe('readWhatIf', () => {
  it('holds every candidate once, calibration stamps last, with the grades that count', async () => {
    const { db } = scenario
    const rows = await readWhatIf(db, await lead())
    expect([...rows.ids]).toEqual([ids[0], ids[1], ids[2], ids[5], ids[3], ids[4]])
    expect(rows.candidates).toBe(4)
    expect([...rows.truth]).toEqual([...Array<number>(4).fill(UNKNOWN_TRUTH), LENS, NOT_A_LENS])
    expect([...rows.tallies.looks]).toEqual([3, 3, 4, 0, 2, 2])
    expect([...rows.tallies.grades]).toEqual([3, 2, 4, 0, 2, 2])
    expect([...rows.tallies.points]).toEqual([8, 0, 6, 0, 5, 0])
    expect([...rows.tallies.squaredPoints]).toEqual([22, 0, 18, 0, 13, 0])
    expect(rows.about).toMatchObject({
      rule: { method: 'mean', version: 1 },
      reliabilities: { from: 'fit' },
      graders: 4,
    })
  })

  it('holds the looks of calibration stamps in the order given, a correction where its answer was first given', async () => {
    const { db, campaign, graders } = scenario
    await giveGrade(db, campaign, ids[4], graders[2], 'U')
    const first = await db
      .selectFrom('grade')
      .select('id')
      .where('candidate_id', '=', ids[3])
      .where('person_id', '=', graders[0].id)
      .executeTakeFirstOrThrow()
    await giveGrade(db, campaign, ids[3], graders[0], 'C', { replaces: first.id })
    const { stampLooks } = await readWhatIf(db, await lead())
    expect([...stampLooks.start]).toEqual([0, 2, 5])
    // C and B at the first stamp; N, N and 'cannot judge', which weighs nothing, at the other.
    expect([...stampLooks.grade]).toEqual([2, 1, 3, 3, 255])
    expect(stampLooks.weight[4]).toBe(0)
  })

  it('weighs a look at a stamp without what that stamp taught of its grader', async () => {
    const { db, campaign } = scenario
    await giveGrade(db, campaign, ids[3], scenario.lead, 'A')
    const { stampLooks } = await readWhatIf(db, await lead())
    // Of somebody who graded nothing else the pseudo-counts are left: A for 4 of 10 lenses and for 0.5 of 10 others.
    expect(stampLooks.weight[2]).toBeCloseTo(Math.log(8), 12)
  })

  it('foretells what a run makes of a changed rule, candidate by candidate', async () => {
    const { db, campaign } = scenario
    const tried = RuleInput.parse({
      method: 'mean',
      gradesWanted: 3,
      leastGrades: 3,
      confirmMean: 2.5,
      setAsideMean: 0.5,
    })
    const columns = withProbabilities(await readWhatIf(db, await lead()))
    const foretold = tryRule(columns, tried)
    await changeRule(db, await lead(), tried)
    await runConsensus(db, await lead())
    const states = await db
      .selectFrom('candidate')
      .select(['id', 'state'])
      .where('campaign_id', '=', campaign.id)
      .where('truth', 'is', null)
      .execute()
    const came = Object.fromEntries(OUTCOMES.map((one) => [one, states.filter(({ state }) => state === one).length]))
    expect(foretold.then).toEqual(came)
    expect(foretold.then.confirmed).toBe(1)
    const again = tryRule(withProbabilities(await readWhatIf(db, await lead())), tried)
    expect(again.changed).toBe(0)
  })

  it('goes by the reliabilities of the newest run where it has some, and then foretells that run to the candidate', async () => {
    const { db } = scenario
    const rule = RuleInput.parse({ method: 'reliability', gradesWanted: 4, leastGrades: 1, falseConfirmed: 0.1 })
    await changeRule(db, await lead(), rule)
    const before = await readWhatIf(db, await lead())
    await runConsensus(db, await lead())
    const columns = withProbabilities(await readWhatIf(db, await lead()))
    expect(before.about.reliabilities).toEqual({ from: 'fit' })
    expect(columns.about.reliabilities).toMatchObject({ from: 'run' })
    expect([...columns.tallies.evidence]).toEqual([...before.tallies.evidence])
    const trial = tryRule(columns, rule)
    expect(trial.changed).toBe(0)
    expect(trial.then.open).toBeLessThan(4)
    const estimates = await db.selectFrom('estimate').select(['candidate_id as id', 'probability']).execute()
    for (const { id, probability } of estimates) {
      expect(columns.probabilities[columns.ids.indexOf(id)]).toBeCloseTo(probability, 12)
    }
  })

  it('reads again where a run comes in between grades and states, so that both are of the same grades', async () => {
    const { db, campaign, graders } = scenario
    await changeRule(db, await lead(), RuleInput.parse({ method: 'mean', gradesWanted: 4, leastGrades: 1 }))
    between.readings = [
      async () => {
        await giveGrade(db, campaign, ids[5], graders[0], 'A')
        await runConsensus(db, await lead())
      },
    ]
    const rows = await readWhatIf(db, await lead())
    expect(between.readings).toEqual([])
    const row = rows.ids.indexOf(ids[5])
    expect([OUTCOMES[rows.state[row]], rows.tallies.points[row]]).toEqual(['confirmed', 3])
    expect(rows.about.gradesSinceRun).toBe(0)
  })

  it('counts a correction once and nothing of a grader who is left out', async () => {
    const { db, campaign, graders, lead: decider } = scenario
    const grade = await db.selectFrom('grade').select('id').where('candidate_id', '=', ids[0]).executeTakeFirstOrThrow()
    await giveGrade(db, campaign, ids[0], graders[0], 'C', { replaces: grade.id })
    await insertLeftOut(db, {
      campaignId: campaign.id,
      personId: graders[1].id,
      leftOut: true,
      reason: 'not looking',
      decidedBy: decider.id,
      now: '2026-01-03T00:00:00.000Z',
    })
    const rows = await readWhatIf(db, await lead())
    // C of the first grader and B of the third: 1 + 2 points.
    expect([rows.tallies.looks[0], rows.tallies.points[0]]).toEqual([2, 3])
    expect(rows.about).toMatchObject({ graders: 3, leftOut: 1 })
  })

  it('knows which candidates hold a ruling, and how many grades came since the newest run', async () => {
    const { db, campaign, graders } = scenario
    await runConsensus(db, await lead())
    await ruleOnCandidate(db, await lead(), ids[2], { outcome: 'confirmed', grade: 'B', reason: 'An arc.' })
    await giveGrade(db, campaign, ids[5], graders[0], 'A')
    const rows = await readWhatIf(db, await lead())
    expect([...rows.ruled]).toEqual([0, 0, 1, 0, 0, 0])
    expect(rows.state[2]).toBe(OUTCOMES.indexOf('confirmed'))
    expect(rows.about.gradesSinceRun).toBe(1)
  })

  it('knows no share of lenses without a grade', async () => {
    const { db, stranger, otherCampaign } = scenario
    await addImagedCandidate(db, otherCampaign, 'far')
    const { permitCampaign } = await import('@/lib/work/people/permission')
    const rows = await readWhatIf(db, await permitCampaign(db, stranger, otherCampaign.slug, 'lead'))
    expect(rows).toMatchObject({ candidates: 1, about: { lensShare: null, reliabilities: null, gradesSinceRun: null } })
  })

  it.each(['grader', 'viewer', 'somebody else'])(
    'is refused to a %s, who may not know calibration stamps',
    async (who) => {
      const { graders, reader, stranger } = scenario
      const viewer = { grader: graders[0], viewer: reader, 'somebody else': stranger }[who] ?? null
      await expect(scenario.permit(viewer ?? stranger, 'lead')).rejects.toMatchObject({
        status: who === 'somebody else' ? 404 : 403,
      })
    },
  )
})

describe('showCandidates', () => {
  it('names the candidates of this campaign and no others', async () => {
    const { db, otherCampaign } = scenario
    const far = await addImagedCandidate(db, otherCampaign, 'far')
    expect(await showCandidates(db, await lead(), [ids[1], far, 99_999])).toEqual([
      { id: ids[1], name: 'two', thumbnail: null },
    ])
  })
})

describe('makeRule', () => {
  const tried = RuleInput.parse({ method: 'reliability', falseConfirmed: 0.002 })

  it('appends the tried rule as the next version and changes no state by itself', async () => {
    const { db, campaign } = scenario
    const before = await decisionRows(db)
    expect(await makeRule(db, await lead(), tried, 1)).toEqual({ version: 2 })
    const versions = await db
      .selectFrom('rule')
      .selectAll()
      .where('campaign_id', '=', campaign.id)
      .orderBy('version')
      .execute()
    expect(versions.map(({ version, method }) => [version, method])).toEqual([
      [1, 'mean'],
      [2, 'reliability'],
    ])
    const audited = (rows: unknown) => (rows as unknown[][]).slice(0, -1)
    expect(audited(await decisionRows(db))).toEqual(audited(before))
  })

  it('refuses when another version came into force since the numbers were read, and appends nothing', async () => {
    const { db } = scenario
    await changeRule(db, await lead(), RuleInput.parse({ method: 'mean', confirmMean: 2.2 }))
    await expect(makeRule(db, await lead(), tried, 1)).rejects.toMatchObject({ status: 409, type: 'rule-changed' })
    expect(await db.selectFrom('rule').selectAll().where('version', '>', 2).execute()).toEqual([])
  })

  it('takes one of two that were tried against one version at once, and refuses the other', async () => {
    const { db } = scenario
    const permit = await lead()
    const others = RuleInput.parse({ method: 'reliability', falseConfirmed: 0.01 })
    const both = await Promise.allSettled([makeRule(db, permit, tried, 1), makeRule(db, permit, others, 1)])
    expect(both[0]).toEqual({ status: 'fulfilled', value: { version: 2 } })
    expect(both[1]).toMatchObject({ status: 'rejected', reason: { status: 409, type: 'rule-changed' } })
    expect(await db.selectFrom('rule').selectAll().where('version', '>', 2).execute()).toEqual([])
  })

  it('refuses the rule that is in force already', async () => {
    const { db } = scenario
    const same = RuleInput.parse({ method: 'mean', gradesWanted: 4, leastGrades: 2 })
    await expect(makeRule(db, await lead(), same, 1)).rejects.toMatchObject({ status: 409, type: 'rule-unchanged' })
  })
})
