import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { insertRule, requireRule } from '@/db/queries/campaigns'
import { runDueJobs } from '@/lib/platform/jobs/run-jobs'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { ruleOf } from '@/lib/work/campaigns/rule-in-force'
import { fromJson } from '@/db/schema/values'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { decisionRows, giveGrade, giveGrades } from './_give-grade'
import { computeRun } from './compute-run'
import { consensusJob } from './consensus-job'
import { runConsensus, runConsensusByItself } from './run-consensus'

const RULE = { gradesWanted: 4, leastGrades: 3, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }

async function scenarioWith(letters: Record<string, string>): Promise<Scenario & { ids: Record<string, number> }> {
  const scenario = await makeScenario(RULE)
  const ids: Record<string, number> = {}
  for (const [name, given] of Object.entries(letters)) {
    const place = { raDeg: 10 + Object.keys(ids).length, decDeg: -5 }
    ids[name] = await addImagedCandidate(scenario.db, scenario.campaign, name, place)
    await giveGrades(scenario.db, scenario.campaign, ids[name], scenario.graders, given)
  }
  return { ...scenario, ids }
}

async function statesOf({ db, campaign }: Scenario): Promise<Record<string, string>> {
  const rows = await db
    .selectFrom('candidate')
    .select(['name', 'state'])
    .where('campaign_id', '=', campaign.id)
    .execute()
  return Object.fromEntries(rows.map((row) => [row.name, row.state]))
}

describe('a consensus run', () => {
  it('brings each candidate into the state that the rule gives it, with verdict, change, entry and designation', async () => {
    const scenario = await scenarioWith({ sure: 'AAB', not: 'NNC', torn: 'AANN', early: 'A', fresh: '' })
    const { db, ids } = scenario
    const answer = await runConsensus(db, await scenario.permit(scenario.lead, 'lead'))
    expect(await statesOf(scenario)).toEqual({
      sure: 'confirmed',
      not: 'set aside',
      torn: 'split',
      early: 'open',
      fresh: 'open',
    })
    expect(answer.unchanged).toBe(false)
    expect(answer.summary).toMatchObject({
      candidates: 5,
      grades: 11,
      cannotJudge: 0,
      graders: 4,
      open: 2,
      split: 1,
      confirmed: 1,
      setAside: 1,
      changed: 4,
    })
    const sure = await db.selectFrom('candidate').selectAll().where('id', '=', ids.sure).executeTakeFirstOrThrow()
    const verdict = await db
      .selectFrom('verdict')
      .selectAll()
      .where('candidate_id', '=', ids.sure)
      .executeTakeFirstOrThrow()
    expect(sure).toMatchObject({ state_cause: 'verdict', state_cause_id: verdict.id, verdict_id: verdict.id })
    expect(verdict).toMatchObject({ outcome: 'confirmed', grades: 3, run_id: answer.id })
    expect(
      await db.selectFrom('state_change').selectAll().where('candidate_id', '=', ids.sure).execute(),
    ).toMatchObject([{ from_state: 'open', to_state: 'confirmed', cause: 'verdict', cause_id: verdict.id }])
    expect(await db.selectFrom('entry').select(['candidate_id', 'event']).execute()).toEqual([
      { candidate_id: ids.sure, event: 'entered' },
    ])
    // 10 deg = 00h40m00s, -5 deg = -05d00m00s: exact.
    expect(await db.selectFrom('designation').select(['candidate_id', 'designation']).execute()).toEqual([
      { candidate_id: ids.sure, designation: 'SWS J004000.00-050000.0' },
    ])
  })

  it('writes nothing when it is run again, and answers the run that stands', async () => {
    const scenario = await scenarioWith({ sure: 'AAB', torn: 'AANN' })
    const permit = await scenario.permit(scenario.lead, 'lead')
    const first = await runConsensus(scenario.db, permit)
    const rows = await decisionRows(scenario.db)
    const second = await runConsensus(scenario.db, permit)
    expect(second).toEqual({ ...first, unchanged: true })
    expect(await decisionRows(scenario.db)).toEqual(rows)
  })

  it('runs anew for a new rule although no grade is new, and gives only changed candidates a verdict', async () => {
    const scenario = await scenarioWith({ sure: 'AAA', torn: 'AAN' })
    const permit = await scenario.permit(scenario.lead, 'lead')
    const first = await runConsensus(scenario.db, permit)
    const { gradesWanted, leastGrades, ...parameters } = { ...RULE, splitSpread: 1.5 }
    const rule = {
      campaignId: scenario.campaign.id,
      version: 2,
      method: 'mean' as const,
      gradesWanted,
      leastGrades,
      parameters,
    }
    await insertRule(scenario.db, { ...rule, createdBy: scenario.lead.id, now: '2026-01-03T00:00:00.000Z' })
    const second = await runConsensus(scenario.db, permit)
    expect(second).toMatchObject({ unchanged: false, ruleVersion: 2 })
    expect(second.inputDigest).not.toBe(first.inputDigest)
    expect(await statesOf(scenario)).toEqual({ sure: 'confirmed', torn: 'confirmed' })
    expect(await runConsensus(scenario.db, permit)).toMatchObject({ id: second.id, unchanged: true })
  })

  it('counts each person once: corrections and asked looks in place of the first, repeats and U never as a number', async () => {
    const scenario = await scenarioWith({ one: 'AAAU' })
    const { db, campaign, graders, ids } = scenario
    const first = await db.selectFrom('grade').selectAll().orderBy('id').executeTakeFirstOrThrow()
    await giveGrade(db, campaign, ids.one, graders[0], 'B', { replaces: first.id })
    await giveGrade(db, campaign, ids.one, graders[1], 'N', { occasion: 'repeat' })
    await giveGrade(db, campaign, ids.one, graders[2], 'C', { occasion: 'asked' })
    await runConsensus(db, await scenario.permit(scenario.lead, 'lead'))
    const verdict = await db.selectFrom('verdict').selectAll().executeTakeFirstOrThrow()
    // B 2, A 3, C 1: mean 2, population standard deviation sqrt(2/3); the U is a look and no grade.
    expect(verdict).toMatchObject({ grades: 3, cannot_judge: 1, mean: 2, outcome: 'confirmed' })
    expect(verdict.spread).toBeCloseTo(Math.sqrt(2 / 3), 12)
  })

  it('reads no grade that came late, whoever gave it', async () => {
    const scenario = await scenarioWith({ one: 'AAB' })
    const { db, campaign, graders, ids } = scenario
    const lead = await scenario.permit(scenario.lead, 'lead')
    await runConsensus(db, lead)
    const before = await db.selectFrom('verdict').selectAll().execute()
    await giveGrade(db, campaign, ids.one, graders[0], 'N', { occasion: 'late' })
    await giveGrade(db, campaign, ids.one, graders[3], 'N', { occasion: 'late' })
    await runConsensus(db, lead)
    expect(before).toMatchObject([{ grades: 3 }])
    expect(await db.selectFrom('verdict').selectAll().execute()).toEqual(before)
  })

  it('measures alpha over the whole campaign as the reference panel has it', async () => {
    // fixtures/agreement/panel.json: 200 items, 8 raters, 960 ratings with gaps; ordinal alpha by three implementations.
    const expected = JSON.parse(readFileSync('fixtures/agreement/panel.json', 'utf8')) as {
      krippendorff_alpha: { ordinal: number; pairable: number }
    }
    const lines = readFileSync('fixtures/agreement/panel-ratings.csv', 'utf8').trim().split(/\r?\n/).slice(1)
    const { db, campaign, graders, lead, permit } = await makeScenario({ ...RULE, gradesWanted: 8 }, 8)
    for (const line of lines) {
      const [name, ...cells] = line.split(',')
      const id = await addImagedCandidate(db, campaign, name)
      for (const [rater, cell] of cells.entries()) {
        if (cell !== '')
          await giveGrade(db, campaign, id, graders[rater], (['N', 'C', 'B', 'A'] as const)[Number(cell)])
      }
    }
    const { summary } = await runConsensus(db, await permit(lead, 'lead'))
    expect(summary.alphaOrdinal).toBeCloseTo(expected.krippendorff_alpha.ordinal, 11)
    expect(summary.alphaNote).toBe('Over 959 grades of the 199 candidates that have two or more.')
    expect(summary.kappaNote).toContain('Over 60 of 200 graded candidates, those with exactly 5 grades')
    expect(summary.grades).toBe(960)
  })

  it('gives again from its stored input what it stored, also after later grades', async () => {
    const scenario = await scenarioWith({ sure: 'AAB', not: 'NNC', torn: 'AANN', early: 'A' })
    const { db, campaign, graders, ids } = scenario
    await runConsensus(db, await scenario.permit(scenario.lead, 'lead'))
    const run = await db.selectFrom('run').selectAll().executeTakeFirstOrThrow()
    const verdicts = await db.selectFrom('verdict').selectAll().orderBy('candidate_id').execute()

    const early = await db
      .selectFrom('grade')
      .select('id')
      .where('candidate_id', '=', ids.early)
      .executeTakeFirstOrThrow()
    await giveGrade(db, campaign, ids.early, graders[0], 'N', { replaces: early.id })
    await giveGrade(db, campaign, ids.sure, graders[3], 'N')
    await addImagedCandidate(db, campaign, 'late')

    const rule = ruleOf(await requireRule(db, campaign.id))
    const input = {
      newestGradeId: run.newest_grade_id,
      newestCandidateId: run.newest_candidate_id,
      newestLeftOutId: run.newest_left_out_id,
    }
    const again = await computeRun(db, { campaignId: campaign.id, rule, ...input })
    expect(again.inputDigest).toBe(run.input_digest)
    expect({ ...again.summary, changed: 4 }).toEqual(fromJson(run.summary))
    // The candidates still have that run's verdicts, so that nothing differs from them.
    expect(again.changed).toEqual([])
    expect(verdicts).toHaveLength(4)

    const newer = await computeRun(db, { campaignId: campaign.id, rule, ...input, newestGradeId: 1e9 })
    expect(newer.inputDigest).not.toBe(run.input_digest)
    expect(newer.changed.map((verdict) => verdict.candidateId)).toEqual([ids.sure, ids.early].sort((a, b) => a - b))
  })

  it('gives two candidates on one place different names, which stay', async () => {
    const { db, campaign, graders, lead, permit } = await makeScenario(RULE)
    for (const name of ['one', 'two', 'three']) {
      // All three truncate to the same hundredth of a second and tenth of an arcsecond.
      const place = { raDeg: 150.000001 + (name === 'two' ? 0.00001 : 0), decDeg: 2.000001 }
      await giveGrades(db, campaign, await addImagedCandidate(db, campaign, name, place), graders, 'AAA')
    }
    await runConsensus(db, await permit(lead, 'lead'))
    const names = await db.selectFrom('designation').select('designation').orderBy('candidate_id').execute()
    expect(names.map((row) => row.designation)).toEqual([
      'SWS J100000.00+020000.0',
      'SWS J100000.00+020000.0 (2)',
      'SWS J100000.00+020000.0 (3)',
    ])
  })

  it('confirms a candidate without a position and names it by the run after the position has come', async () => {
    const scenario = await scenarioWith({ lost: 'AAA' })
    const { db, ids } = scenario
    const permit = await scenario.permit(scenario.lead, 'lead')
    await db.updateTable('candidate').set({ ra_deg: null, dec_deg: null }).execute()
    await runConsensus(db, permit)
    expect(await statesOf(scenario)).toEqual({ lost: 'confirmed' })
    expect(await db.selectFrom('designation').selectAll().execute()).toEqual([])
    await db.updateTable('candidate').set({ ra_deg: 10, dec_deg: -5 }).where('id', '=', ids.lost).execute()
    expect(await runConsensus(db, permit)).toMatchObject({ unchanged: true })
    expect(await db.selectFrom('designation').select('designation').execute()).toEqual([
      { designation: 'SWS J004000.00-050000.0' },
    ])
    const rows = await decisionRows(db)
    await runConsensus(db, permit)
    expect(await decisionRows(db)).toEqual(rows)
  })

  it('keeps the name of a candidate that leaves the catalogue and comes back', async () => {
    const scenario = await scenarioWith({ one: 'AAB' })
    const { db, campaign, graders, ids } = scenario
    const permit = await scenario.permit(scenario.lead, 'lead')
    await runConsensus(db, permit)
    const fourth = await giveGrade(db, campaign, ids.one, graders[3], 'N')
    await runConsensus(db, permit)
    expect(await statesOf(scenario)).toEqual({ one: 'split' })
    await db.updateTable('candidate').set({ ra_deg: 99 }).execute()
    await giveGrade(db, campaign, ids.one, graders[3], 'A', { replaces: fourth })
    await runConsensus(db, permit)
    const events = await db.selectFrom('entry').select('event').orderBy('id').execute()
    expect(events.map((row) => row.event)).toEqual(['entered', 'left', 'entered'])
    expect(await db.selectFrom('designation').select('designation').execute()).toEqual([
      { designation: 'SWS J004000.00-050000.0' },
    ])
  })

  it('leaves another campaign alone', async () => {
    const scenario = await scenarioWith({ here: 'AAB' })
    const { db, otherCampaign, graders } = scenario
    const there = await addImagedCandidate(db, otherCampaign, 'there')
    await giveGrades(db, otherCampaign, there, graders, 'AAAAA'.slice(0, 4))
    const answer = await runConsensus(db, await scenario.permit(scenario.lead, 'lead'))
    expect(answer.summary).toMatchObject({ candidates: 1, grades: 3 })
    const other = await db.selectFrom('candidate').selectAll().where('id', '=', there).executeTakeFirstOrThrow()
    expect(other).toMatchObject({ state: 'open', verdict_id: null })
  })

  it('is for leads: a grader, a viewer and a stranger get no permit for it', async () => {
    const { permit, graders, reader, stranger } = await makeScenario(RULE)
    await expect(permit(graders[0], 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(permit(reader, 'lead')).rejects.toMatchObject({ status: 403 })
    await expect(permit(stranger, 'lead')).rejects.toMatchObject({ status: 404 })
  })

  it('leaves everything as it was when writing fails half-way', async () => {
    const scenario = await scenarioWith({ sure: 'AAB' })
    const { db } = scenario
    await db
      .insertInto('designation')
      .values({
        candidate_id: scenario.ids.sure,
        campaign_id: scenario.campaign.id,
        designation: 'SWS J000000.00+000000.0',
        given_at: '2026-01-01T00:00:00.000Z',
      })
      .execute()
    const rows = await decisionRows(db)
    // A broken table in place of the catalogue's: the last write of the transaction fails.
    await db.schema.alterTable('entry').renameTo('entry_away').execute()
    await expect(runConsensus(db, await scenario.permit(scenario.lead, 'lead'))).rejects.toThrow(/entry/)
    await db.schema.alterTable('entry_away').renameTo('entry').execute()
    expect(await decisionRows(db)).toEqual(rows)
  })

  it('starts by itself as a job, once however often it is asked for', async () => {
    const scenario = await scenarioWith({ sure: 'AAB' })
    const { db, campaign } = scenario
    await requestConsensus(db, campaign.id)
    await requestConsensus(db, campaign.id)
    expect(await runDueJobs(db, { [JOB.consensus]: consensusJob })).toBe(1)
    expect(await statesOf(scenario)).toEqual({ sure: 'confirmed' })
    expect(await db.selectFrom('run').select('started_by').execute()).toEqual([{ started_by: null }])
  })

  it('starts again when another run was written between its reading and its writing', async () => {
    const scenario = await scenarioWith({ one: 'AAB' })
    const { db, campaign, graders, ids } = scenario
    let overtaken = false
    const overtake = new Proxy(db, {
      get(target, key) {
        const value = Reflect.get(target, key) as unknown
        if (key !== 'transaction' || overtaken) return typeof value === 'function' ? value.bind(target) : value
        return () => ({
          execute: async (write: Parameters<ReturnType<typeof db.transaction>['execute']>[0]) => {
            overtaken = true
            await giveGrade(db, campaign, ids.one, graders[3], 'N')
            await runConsensusByItself(db, campaign.id)
            return db.transaction().execute(write)
          },
        })
      },
    })
    const answer = await runConsensusByItself(overtake, campaign.id)
    expect(overtaken).toBe(true)
    expect(answer).toMatchObject({ unchanged: true, summary: { grades: 4, split: 1 } })
    expect(await statesOf(scenario)).toEqual({ one: 'split' })
    expect(await db.selectFrom('run').select('id').execute()).toHaveLength(1)
  })

  it('decides thousands of candidates while other work of the process goes on', async () => {
    const { db, campaign, graders, lead, permit } = await makeScenario(RULE)
    const candidates = 1200
    await db.transaction().execute(async (transaction) => {
      for (let index = 0; index < candidates; index++) {
        const place = { raDeg: (index * 0.1) % 360, decDeg: -5 }
        const id = await addImagedCandidate(transaction, campaign, `c${index}`, place)
        await giveGrades(transaction, campaign, id, graders, ['AAAB', 'NNNC', 'AANN', 'BC'][index % 4])
      }
    })
    let turns = 0
    const other = setInterval(() => (turns += 1), 0)
    const { summary } = await runConsensus(db, await permit(lead, 'lead'))
    clearInterval(other)
    expect(summary).toMatchObject({
      candidates,
      confirmed: 300,
      setAside: 300,
      split: 300,
      open: 300,
      changed: candidates,
    })
    expect(
      await db
        .selectFrom('designation')
        .select((e) => e.fn.countAll().as('n'))
        .execute(),
    ).toEqual([{ n: 300 }])
    expect(turns).toBeGreaterThan(3)
  }, 60_000)
})
