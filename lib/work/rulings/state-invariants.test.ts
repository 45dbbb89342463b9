import fc from 'fast-check'
import { sql, type Kysely } from 'kysely'
import { describe, expect, it } from 'vitest'
import type { DB } from '@/db/schema'
import { decide } from '@/lib/science/agreement/mean-rule'
import { ruleInForce, type MeanRuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { giveGrade, giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import type { RulingInput } from './ruling-input'
import { ruleOnCandidate } from './rule-on-candidate'

const RULE = { gradesWanted: 4, leastGrades: 2, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }

type Step =
  | { do: 'grade'; grader: number; grade: 'A' | 'B' | 'C' | 'N' | 'U' }
  | { do: 'run' }
  | { do: 'rule'; outcome: RulingInput['outcome'] }

const step: fc.Arbitrary<Step> = fc.oneof(
  fc.record({
    do: fc.constant('grade' as const),
    grader: fc.nat({ max: 3 }),
    grade: fc.constantFrom('A' as const, 'B' as const, 'C' as const, 'N' as const, 'U' as const),
  }),
  fc.record({ do: fc.constant('run' as const) }),
  fc.record({
    do: fc.constant('rule' as const),
    outcome: fc.constantFrom('confirmed' as const, 'set aside' as const, 'open' as const, 'by verdict' as const),
  }),
)

async function expectConsistent(db: Kysely<DB>, id: number): Promise<void> {
  const candidate = await db.selectFrom('candidate').selectAll().where('id', '=', id).executeTakeFirstOrThrow()
  const rulings = await db
    .selectFrom('ruling')
    .selectAll()
    .where('candidate_id', '=', id)
    .orderBy('id', 'desc')
    .execute()
  const verdicts = await db
    .selectFrom('verdict')
    .selectAll()
    .where('candidate_id', '=', id)
    .orderBy('id', 'desc')
    .execute()
  const ruling = rulings.at(0)
  const verdict = verdicts.at(0)
  const ruled = ruling && ruling.outcome !== 'by verdict'
  expect(candidate.state).toBe(ruled ? ruling.outcome : (verdict?.outcome ?? 'open'))
  if (ruled) expect([candidate.state_cause, candidate.state_cause_id]).toEqual(['ruling', ruling.id])
  else if (verdict) expect([candidate.state_cause, candidate.state_cause_id]).toEqual(['verdict', verdict.id])
  expect(candidate.ruling_id).toBe(ruling?.id ?? null)
  expect(candidate.verdict_id).toBe(verdict?.id ?? null)

  // The changes are a chain from open to the present state, each with a cause that exists and is this candidate's.
  let state = 'open'
  const changes = await db.selectFrom('state_change').selectAll().where('candidate_id', '=', id).orderBy('id').execute()
  for (const change of changes) {
    expect(change.from_state).toBe(state)
    expect(change.to_state).not.toBe(state)
    state = change.to_state
    const causes = change.cause === 'ruling' ? rulings : verdicts
    expect(causes.map((row) => row.id)).toContain(change.cause_id)
  }
  expect(state).toBe(candidate.state)

  // In the catalogue exactly while it is confirmed, and never entered or left twice running.
  const entries = await db.selectFrom('entry').select('event').where('candidate_id', '=', id).orderBy('id').execute()
  const events = entries.map((row) => row.event)
  expect(events).toEqual(events.map((_, index) => (index % 2 === 0 ? 'entered' : 'left')))
  expect(events.at(-1) === 'entered').toBe(candidate.state === 'confirmed')
}

describe('the state of a candidate', () => {
  it('is what its newest ruling says, else its newest verdict, else open, whatever happens in which order', async () => {
    const { db, campaign, graders, lead, permit } = await makeScenario(RULE)
    const leads = await permit(lead, 'lead')
    let number = 0
    await fc.assert(
      fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 14 }), async (steps) => {
        const id = await addImagedCandidate(db, campaign, `candidate ${(number += 1)}`)
        const standing = new Map<number, number>()
        for (const next of steps) {
          if (next.do === 'run') await runConsensus(db, leads)
          if (next.do === 'grade') {
            const replaces = standing.get(next.grader) ?? null
            standing.set(next.grader, await giveGrade(db, campaign, id, graders[next.grader], next.grade, { replaces }))
          }
          if (next.do === 'rule') {
            const grade = next.outcome === 'confirmed' ? 'A' : null
            await ruleOnCandidate(db, leads, id, { outcome: next.outcome, grade, reason: 'why' }).catch(() => {})
          }
          await expectConsistent(db, id)
        }
      }),
      { numRuns: 60, seed: 20261201 },
    )
  }, 60_000)

  it('follows the rule of the mean: the stored verdict is the one that its grades give', async () => {
    const { db, campaign, graders, lead, permit } = await makeScenario(RULE)
    const letters = ['A', 'B', 'C', 'N', 'U'] as const
    for (const first of letters) {
      for (const second of letters) {
        const id = await addImagedCandidate(db, campaign, `${first}${second}`)
        await giveGrades(db, campaign, id, graders, `${first}${second}`)
      }
    }
    await runConsensus(db, await permit(lead, 'lead'))
    const rule = (await ruleInForce(db, campaign.id)) as MeanRuleInForce
    const rows = await db
      .selectFrom('verdict')
      .innerJoin('candidate', 'candidate.id', 'verdict.candidate_id')
      .select(['candidate.name', 'verdict.outcome', 'verdict.reason'])
      .execute()
    expect(rows).toHaveLength(25)
    for (const row of rows) {
      const { outcome, reason } = decide(
        rule,
        [...row.name].map((grade) => ({ grade: grade as 'A' })),
      )
      expect(row).toMatchObject({ outcome, reason })
    }
  })
})

describe('a calibration candidate', () => {
  async function calibrationCase() {
    const scenario = await makeScenario(RULE)
    const { db, campaign, graders } = scenario
    const id = await addImagedCandidate(db, campaign, 'known', { raDeg: 20, decDeg: 20 })
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', id).execute()
    await giveGrades(db, campaign, id, graders, 'AAAA')
    return { ...scenario, id, lead: await scenario.permit(scenario.lead, 'lead') }
  }

  it('gets no verdict, no state and no entry from a run, and is in none of its numbers', async () => {
    const { db, lead, id, campaign, graders } = await calibrationCase()
    const other = await addImagedCandidate(db, campaign, 'other')
    await giveGrades(db, campaign, other, graders, 'BB')
    const { summary } = await runConsensus(db, lead)
    expect(summary).toMatchObject({ candidates: 1, grades: 2, graders: 2, confirmed: 1 })
    expect(await db.selectFrom('verdict').select('candidate_id').execute()).toEqual([{ candidate_id: other }])
    expect(await db.selectFrom('entry').select('candidate_id').execute()).toEqual([{ candidate_id: other }])
    const candidate = await db.selectFrom('candidate').selectAll().where('id', '=', id).executeTakeFirstOrThrow()
    expect(candidate).toMatchObject({ state: 'open', verdict_id: null, state_cause: null })
  })

  it('cannot be ruled on', async () => {
    const { db, lead, id } = await calibrationCase()
    const ruling: RulingInput = { outcome: 'confirmed', grade: 'A', reason: 'I know it.' }
    await expect(ruleOnCandidate(db, lead, id, ruling)).rejects.toMatchObject({ status: 409, type: 'calibration' })
    expect(await db.selectFrom('ruling').selectAll().execute()).toEqual([])
  })

  it('is kept out by the database itself, whoever writes', async () => {
    const { db, lead, id, campaign } = await calibrationCase()
    await expect(
      db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', id).execute(),
    ).rejects.toThrow()
    const at = '2026-01-01T00:00:00.000Z'
    const writes = [
      sql`insert into entry (campaign_id, candidate_id, event, cause, cause_id, at)
        values (${campaign.id}, ${id}, 'entered', 'ruling', 1, ${at})`,
      sql`insert into designation (candidate_id, campaign_id, designation, given_at)
        values (${id}, ${campaign.id}, 'SWS J1', ${at})`,
      sql`insert into ruling (candidate_id, person_id, outcome, reason, created_at)
        values (${id}, ${lead.viewer.id}, 'set aside', 'why', ${at})`,
    ]
    for (const write of writes) await expect(write.execute(db)).rejects.toThrow(/calibration candidate/)
  })

  it('cannot be made of a candidate that is confirmed already', async () => {
    const { db, lead, campaign, graders } = await calibrationCase()
    const other = await addImagedCandidate(db, campaign, 'other')
    await giveGrades(db, campaign, other, graders, 'AA')
    await runConsensus(db, lead)
    await expect(db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', other).execute()).rejects.toThrow()
  })
})
