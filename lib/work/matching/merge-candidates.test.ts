import fc from 'fast-check'
import type { Kysely } from 'kysely'
import { describe, expect, it } from 'vitest'
import { listStandingMerges } from '@/db/queries/merges'
import { listKnownTruths } from '@/db/queries/told-truths'
import type { DB } from '@/db/schema'
import { Problem } from '@/lib/platform/problems/problem'
import { giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { permitCampaign } from '@/lib/work/people/permission'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import { closeScenario } from './_matching-scenario'
import { decideDifferent } from './decide-match'
import { mergeCandidates, partCandidates } from './merge-candidates'
import { DifferInput, MergeInput, ObjectInput } from './merge-input'

const stateOf = async (db: Kysely<DB>, id: number) =>
  (await db.selectFrom('candidate').select('state').where('id', '=', id).executeTakeFirstOrThrow()).state
const reasonOf = async (db: Kysely<DB>, id: number) => {
  const row = await db
    .selectFrom('ruling')
    .select(['outcome', 'grade', 'reason'])
    .where('candidate_id', '=', id)
    .orderBy('id', 'desc')
    .executeTakeFirst()
  return row ?? null
}

describe('merging', () => {
  it('sets the merged one aside by a ruling that names the kept one, whose state and grades stay its own', async () => {
    const { db, lead, permit, a, b, c, graders, campaign } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await giveGrades(db, campaign, a, graders, 'AAAA')
    await giveGrades(db, campaign, b, graders, 'AABB')
    await runConsensus(db, leads)
    expect([await stateOf(db, a), await stateOf(db, b)]).toEqual(['confirmed', 'confirmed'])
    const answer = await mergeCandidates(db, leads, { kept: a, merged: [b, c], reason: 'Two tiles overlap here.' })
    expect(answer).toEqual({ kept: 'SWS A', merged: ['SWS B', 'SWS C'] })
    expect([await stateOf(db, a), await stateOf(db, b), await stateOf(db, c)]).toEqual([
      'confirmed',
      'set aside',
      'set aside',
    ])
    expect(await reasonOf(db, b)).toMatchObject({
      outcome: 'set aside',
      reason: 'The same object as SWS A: merged into it. Two tiles overlap here.',
    })
    expect(await reasonOf(db, a)).toBeNull()
    const grades = await db.selectFrom('grade').select('id').where('candidate_id', '=', a).execute()
    expect(grades).toHaveLength(4)
    // It has left the catalogue with the ruling as the cause.
    const entries = await db.selectFrom('entry').select(['event', 'cause']).where('candidate_id', '=', b).execute()
    expect(entries).toEqual([
      { event: 'entered', cause: 'verdict' },
      { event: 'left', cause: 'ruling' },
    ])
    // Another run leaves it aside.
    await runConsensus(db, leads)
    expect(await stateOf(db, b)).toBe('set aside')
    await db.destroy()
  })

  it('is taken back by parting: the verdict holds again, or the ruling that stood before', async () => {
    const { db, lead, permit, a, b, c, graders, campaign } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await giveGrades(db, campaign, b, graders, 'AAAA')
    await runConsensus(db, leads)
    await ruleOnCandidate(db, leads, c, { outcome: 'confirmed', grade: 'B', reason: 'The arc is real.' })
    await mergeCandidates(db, leads, { kept: a, merged: [b, c], reason: 'One galaxy.' })
    expect(await partCandidates(db, leads, b, 'They are two after all.')).toEqual({ kept: 'SWS A', merged: 'SWS B' })
    expect(await stateOf(db, b)).toBe('confirmed')
    expect(await reasonOf(db, b)).toMatchObject({
      outcome: 'by verdict',
      reason: 'Parted from SWS A again. They are two after all.',
    })
    await partCandidates(db, leads, c, 'They are two after all.')
    expect(await stateOf(db, c)).toBe('confirmed')
    expect(await reasonOf(db, c)).toMatchObject({
      outcome: 'confirmed',
      grade: 'B',
      reason: 'Parted from SWS A again. They are two after all. The ruling before holds again: “The arc is real.”',
    })
    expect(await listStandingMerges(db, campaign.id, 10)).toEqual([])
    await db.destroy()
  })

  it('is refused into itself, of what is merged, into what is merged, and of what holds others', async () => {
    const { db, lead, permit, a, b, c } = await closeScenario()
    const leads = await permit(lead, 'lead')
    const merge = (kept: number, ...merged: number[]) => mergeCandidates(db, leads, { kept, merged, reason: 'One.' })
    await expect(merge(a, a)).rejects.toThrow(/into itself/)
    await merge(a, b)
    await expect(merge(c, b)).rejects.toThrow('SWS B was merged into SWS A already. Part the two first.')
    await expect(merge(b, c)).rejects.toThrow('SWS B was itself merged into SWS A.')
    await expect(merge(c, a)).rejects.toThrow('SWS B was merged into SWS A. Keep SWS A, or part them first.')
    await expect(partCandidates(db, leads, a, 'No.')).rejects.toThrow(/SWS A is not merged into another/)
    await db.destroy()
  })

  it('leaves everything as it was where one of several is refused', async () => {
    const { db, lead, permit, a, b, c, d, campaign } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await mergeCandidates(db, leads, { kept: d, merged: [c], reason: 'One.' })
    await expect(mergeCandidates(db, leads, { kept: a, merged: [b, c], reason: 'One.' })).rejects.toThrow(/SWS C was/)
    expect(await stateOf(db, b)).toBe('open')
    expect(await listStandingMerges(db, campaign.id, 10)).toHaveLength(1)
    await db.destroy()
  })

  it('keeps rulings off the merged one until it is parted', async () => {
    const { db, lead, permit, a, b } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await mergeCandidates(db, leads, { kept: a, merged: [b], reason: 'One.' })
    const rule = () => ruleOnCandidate(db, leads, b, { outcome: 'confirmed', grade: 'A', reason: 'A ring.' })
    await expect(rule()).rejects.toThrow('SWS B was merged into SWS A: rule on that one, or part the two first.')
    await partCandidates(db, leads, b, 'Two.')
    await rule()
    expect(await stateOf(db, b)).toBe('confirmed')
    await db.destroy()
  })

  it('takes no calibration stamp, and nothing of another campaign', async () => {
    const { db, lead, permit, a, b, stranger, otherCampaign } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', b).execute()
    await expect(mergeCandidates(db, leads, { kept: a, merged: [b], reason: 'One.' })).rejects.toThrow(
      /calibration stamp/,
    )
    await expect(mergeCandidates(db, leads, { kept: b, merged: [a], reason: 'One.' })).rejects.toThrow(
      /calibration stamp/,
    )
    await expect(decideDifferent(db, leads, { members: [a, b], reason: 'Two.' })).rejects.toThrow(/no candidate here/)
    const elsewhere = await permitCampaign(db, stranger, otherCampaign.slug, 'lead')
    const there = await addImagedCandidate(db, otherCampaign, 'SWS T')
    await expect(mergeCandidates(db, elsewhere, { kept: there, merged: [a], reason: 'One.' })).rejects.toThrow(
      /no candidate/,
    )
    await expect(partCandidates(db, elsewhere, a, 'Two.')).rejects.toThrow(/no candidate/)
    await db.destroy()
  })

  it('keeps both from becoming a calibration stamp afterwards', async () => {
    const { db, lead, permit, campaign, a, b } = await closeScenario()
    await mergeCandidates(db, await permit(lead, 'lead'), { kept: a, merged: [b], reason: 'One.' })
    expect(await listKnownTruths(db, campaign.id, ['SWS A', 'SWS D'])).toMatchObject([{ judged: 1 }, { judged: 0 }])
    for (const id of [a, b]) {
      const told = db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', id).execute()
      await expect(told).rejects.toThrow('a candidate that was merged is no calibration stamp')
    }
    await db.destroy()
  })

  it('is for leads', async () => {
    const { db, graders, reader, permit } = await closeScenario()
    await expect(permit(graders[0], 'lead')).rejects.toThrow(/Only a lead/)
    await expect(permit(reader, 'lead')).rejects.toThrow(/Only a lead/)
    await db.destroy()
  })

  it('cannot be said different of each other while they are merged', async () => {
    const { db, lead, permit, a, b } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await mergeCandidates(db, leads, { kept: a, merged: [b], reason: 'One.' })
    const differ = decideDifferent(db, leads, { members: [a, b], reason: 'Two.' })
    await expect(differ).rejects.toThrow('SWS B is merged into SWS A. Part the two before you say that they differ.')
    await db.destroy()
  })
})

type Step =
  | { do: 'merge'; kept: number; merged: number[] }
  | { do: 'part'; merged: number }
  | { do: 'rule'; on: number; outcome: 'confirmed' | 'set aside' | 'open' | 'by verdict' }
  | { do: 'run' }
const one = fc.nat({ max: 4 })
const step: fc.Arbitrary<Step> = fc.oneof(
  fc.record({
    do: fc.constant('merge' as const),
    kept: one,
    merged: fc.uniqueArray(one, { minLength: 1, maxLength: 2 }),
  }),
  fc.record({ do: fc.constant('part' as const), merged: one }),
  fc.record({
    do: fc.constant('rule' as const),
    on: one,
    outcome: fc.constantFrom('confirmed' as const, 'set aside' as const, 'open' as const, 'by verdict' as const),
  }),
  fc.record({ do: fc.constant('run' as const) }),
)

it('keeps to its rules in any order: merged ones are set aside, hold nothing, and come back as they were', async () => {
  const { db, campaign, lead, graders, permit } = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  const leads = await permit(lead, 'lead')
  let round = 0
  await fc.assert(
    fc.asyncProperty(fc.array(step, { minLength: 3, maxLength: 14 }), async (steps) => {
      round++
      const ids: number[] = []
      for (let k = 0; k < 5; k++) ids.push(await addImagedCandidate(db, campaign, `R${round} ${k}`))
      await giveGrades(db, campaign, ids[0], graders.slice(0, 2), 'AA')
      await giveGrades(db, campaign, ids[1], graders.slice(0, 2), 'NN')
      await runConsensus(db, leads)
      /** What each was before it was merged, by the candidate. */
      const before = new Map<number, string>()
      const into = new Map<number, number>()
      for (const next of steps) {
        try {
          if (next.do === 'run') await runConsensus(db, leads)
          if (next.do === 'rule') {
            const grade = next.outcome === 'confirmed' ? ('B' as const) : null
            await ruleOnCandidate(db, leads, ids[next.on], { outcome: next.outcome, grade, reason: 'By the dice.' })
            expect(into.has(ids[next.on]), 'ruled on while merged').toBe(false)
          }
          if (next.do === 'merge') {
            const merged = next.merged.map((place) => ids[place])
            const states = await Promise.all(merged.map((id) => stateOf(db, id)))
            await mergeCandidates(db, leads, { kept: ids[next.kept], merged, reason: 'By the dice.' })
            merged.forEach((id, place) => {
              before.set(id, states[place])
              into.set(id, ids[next.kept])
            })
          }
          if (next.do === 'part') {
            await partCandidates(db, leads, ids[next.merged], 'By the dice.')
            const id = ids[next.merged]
            expect(await stateOf(db, id)).toBe(before.get(id))
            expect(into.delete(id), 'parted what was not merged').toBe(true)
          }
        } catch (error) {
          if (!(error instanceof Problem)) throw error
        }
      }
      const standing = (await listStandingMerges(db, campaign.id, 1000)).filter(({ mergedId }) =>
        ids.includes(mergedId),
      )
      expect(new Map(standing.map(({ mergedId, keptId }) => [mergedId, keptId]))).toEqual(into)
      for (const { mergedId, keptId, rulingId } of standing) {
        expect(into.has(keptId), 'a chain').toBe(false)
        expect(await stateOf(db, mergedId)).toBe('set aside')
        const row = await db
          .selectFrom('candidate')
          .select('ruling_id')
          .where('id', '=', mergedId)
          .executeTakeFirstOrThrow()
        expect(row.ruling_id).toBe(rulingId)
      }
    }),
    { numRuns: 40 },
  )
  await db.destroy()
}, 120_000)

describe('the database itself', () => {
  it('refuses a merge that breaks the rules, and changes to what was written', async () => {
    const { db, campaign, lead, permit, a, b, c } = await closeScenario()
    await mergeCandidates(db, await permit(lead, 'lead'), { kept: a, merged: [b], reason: 'One.' })
    const row = await db.selectFrom('merge').selectAll().executeTakeFirstOrThrow()
    const ruling = await ruleOnCandidate(db, await permit(lead, 'lead'), c, {
      outcome: 'open',
      grade: null,
      reason: 'x',
    })
    const insert = (change: Partial<typeof row>) =>
      db
        .insertInto('merge')
        .values({ ...row, id: undefined, ruling_id: ruling.rulingId, ...change })
        .execute()
    await expect(insert({ kept_id: c })).rejects.toThrow(/parted before it is merged again/)
    await expect(insert({ kept_id: b, merged_id: c })).rejects.toThrow(/merged itself/)
    await expect(insert({ kept_id: c, merged_id: a })).rejects.toThrow(/holds others/)
    await expect(insert({ kept_id: c, event: 'parted' })).rejects.toThrow(/only what is merged/)
    await expect(insert({ kept_id: a, merged_id: c, campaign_id: campaign.id + 1 })).rejects.toThrow(
      /within their campaign/,
    )
    await expect(db.updateTable('merge').set({ reason: 'x' }).execute()).rejects.toThrow(/never changed/)
    await expect(db.deleteFrom('match_decision').execute()).rejects.toThrow(/never changed/)
    await db.destroy()
  })
})

describe('what a lead sends', () => {
  it('is read from a form, ids with commas between', () => {
    const form = { kept: '4', merged: '5,6', reason: ' One. ' }
    expect(MergeInput.parse(form)).toEqual({ kept: 4, merged: [5, 6], reason: 'One.' })
  })

  it.each([
    [MergeInput, { kept: '4', merged: '', reason: 'One.' }, /at least one candidate/],
    [MergeInput, { kept: '4', merged: '5', reason: ' ' }, /Give a reason/],
    [MergeInput, { kept: '4', merged: '5', reason: 'x'.repeat(1001) }, /at most 1000/],
    [DifferInput, { members: '4', reason: 'Two.' }, /at least two/],
    [ObjectInput, { list: '1', row: '2', decision: 'perhaps', reason: 'Two.' }, /Invalid/],
  ] as const)('is refused with a sentence: %#', (schema, input, expected) => {
    expect(schema.safeParse(input).error?.issues[0].message).toMatch(expected)
  })
})
