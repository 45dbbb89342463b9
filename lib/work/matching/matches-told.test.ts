import { describe, expect, it } from 'vitest'
import { giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { keptOutOfNew, knownIn } from '@/db/queries/matching'
import { candidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { permitCampaign } from '@/lib/work/people/permission'
import { addImagedCandidate, addMember } from '@/tests/_support/scenario'
import { addList, closeScenario, match } from './_matching-scenario'
import { candidateMatches } from './candidate-matches'
import { decideDifferent, decideObject } from './decide-match'
import { duplicatesPage } from './duplicates-page'
import { groupsOfPairs } from './groups-of-pairs'
import { knownLabels } from './known-labels'
import { mergeCandidates, partCandidates } from './merge-candidates'

describe('labels of known objects', () => {
  it('tell leads and viewers of every candidate, nearest first, without what a lead found to differ', async () => {
    const { db, lead, reader, permit, a, b, c, d, list } = await closeScenario()
    const leads = await permit(lead, 'lead')
    const ids = [a, b, c, d]
    for (const person of [leads, await permit(reader, 'read')]) {
      const labels = await knownLabels(db, person, ids)
      expect([...labels.keys()]).toEqual([a, b, c])
      expect(labels.get(a)).toMatchObject([{ list: 'Marsh lenses', name: 'Old ring' }])
      expect(labels.get(a)![0].separationArcsec).toBeCloseTo(0.2, 6)
    }
    const about = { list, row: 1, reason: 'It is the neighbour.' }
    await decideObject(db, leads, c, { ...about, decision: 'different' })
    expect((await knownLabels(db, leads, ids)).has(c)).toBe(false)
    expect((await candidateMatches(db, leads, c))?.objects).toMatchObject([{ decision: 'different' }])
    expect((await candidateMatches(db, await permit(reader, 'read'), c))?.objects).toEqual([])
    await decideObject(db, leads, c, { ...about, decision: 'undecided' })
    expect((await knownLabels(db, leads, ids)).has(c)).toBe(true)
    await expect(decideObject(db, leads, c, { ...about, list: 999, decision: 'different' })).rejects.toThrow(/no list/)
    await db.destroy()
  })

  it('tell a grader of what they have judged and what is decided, and of nothing else', async () => {
    const { db, campaign, lead, permit, graders, a, b, c } = await closeScenario()
    const leads = await permit(lead, 'lead')
    const grader = await permit(graders[0], 'grade')
    const told = async () => [...(await knownLabels(db, grader, [a, b, c])).keys()]
    await giveGrades(db, campaign, b, graders.slice(1), 'AAA')
    expect(await told(), 'not judged').toEqual([])
    expect(await candidateMatches(db, grader, a)).toBeNull()
    await giveGrades(db, campaign, a, graders, 'AAAA')
    expect(await told(), 'judged and still open: so looks a calibration stamp').toEqual([])
    await runConsensus(db, leads)
    expect(await told()).toEqual([a])
    expect(await candidateMatches(db, grader, a)).toMatchObject({ objects: [{ name: 'Old ring' }], near: [] })
    await db.destroy()
  })

  it('follow the rule of each list on what is new', async () => {
    const scenario = await closeScenario()
    const { db, campaign, a, b, c, d } = scenario
    await addList(scenario, [{ raDeg: 150 + 500 / 3600, decDeg: 0 }], { name: 'X-ray', keepsOutOfNew: false })
    await db.insertInto('match_due').values({ campaign_id: campaign.id, candidate_id: d }).execute()
    await match(db, campaign.id)
    const where = async (condition: ReturnType<typeof knownIn>) =>
      (await db.selectFrom('candidate').select('id').where(condition).orderBy('id').execute()).map(({ id }) => id)
    expect(await where(knownIn(campaign.id))).toEqual([a, b, c, d])
    expect(await where(keptOutOfNew(campaign.id))).toEqual([a, b, c])
    expect(await where(knownIn(campaign.id + 1))).toEqual([])
    await db.destroy()
  })
})

describe('the same place in another campaign', () => {
  it('is told to those who are members there', async () => {
    const { db, campaign, otherCampaign, lead, reader, permit, a } = await closeScenario()
    await addImagedCandidate(db, otherCampaign, 'South 1', { raDeg: 150, decDeg: 0 })
    await match(db, otherCampaign.id)
    const seen = async (person: typeof lead) =>
      (await candidateMatches(db, await permit(person, 'read'), a))?.elsewhere.map(({ name }) => name)
    expect(await seen(lead)).toEqual([])
    await addMember(db, otherCampaign, lead, 'viewer', 'S07')
    expect(await seen(lead)).toEqual(['South 1'])
    expect(await seen(reader)).toEqual([])
    await db
      .updateTable('membership')
      .set({ ended_at: '2026-02-01T00:00:00.000Z' })
      .where('campaign_id', '=', otherCampaign.id)
      .where('person_id', '=', lead.id)
      .execute()
    expect(await seen(lead)).toEqual([])
    expect(campaign.id).not.toBe(otherCampaign.id)
    await db.destroy()
  })

  it('is told within the own radius, however far the other campaign looks', async () => {
    const { db, otherCampaign, lead, permit, a } = await closeScenario()
    await addMember(db, otherCampaign, lead, 'viewer', 'S07')
    await db.updateTable('campaign').set({ match_radius_arcsec: 30 }).where('id', '=', otherCampaign.id).execute()
    for (const arcsec of [1.9, 2.1]) {
      await addImagedCandidate(db, otherCampaign, `South ${arcsec}`, { raDeg: 150, decDeg: arcsec / 3600 })
    }
    await match(db, otherCampaign.id)
    const found = await db.selectFrom('candidate_match').select('second_id').where('first_id', '=', a).execute()
    expect(found.length, 'both are kept, for the campaign that looks further').toBeGreaterThanOrEqual(2)
    const seen = (await candidateMatches(db, await permit(lead, 'read'), a))?.elsewhere.map(({ name }) => name)
    expect(seen).toEqual(['South 1.9'])
    await db.destroy()
  })

  it('tells somebody who grades there only what they have judged and what is decided, so that no stamp is missing', async () => {
    const { db, campaign, otherCampaign, lead, graders, permit, a, b } = await closeScenario()
    await addMember(db, otherCampaign, graders[0], 'lead', 'S07')
    const leads = await permit(lead, 'lead')
    const there = await permitCampaign(db, graders[0], otherCampaign.slug, 'read')
    const atA = await addImagedCandidate(db, otherCampaign, 'South 1', { raDeg: 150, decDeg: 0 })
    const atStamp = await addImagedCandidate(db, otherCampaign, 'South 2', { raDeg: 151, decDeg: 0 })
    const stamp = await addImagedCandidate(db, campaign, 'SWS stamp', { raDeg: 151, decDeg: 0 })
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', stamp).execute()
    await match(db, campaign.id)
    await match(db, otherCampaign.id)
    const seen = async (id: number) => (await candidateMatches(db, there, id))?.elsewhere.map(({ name }) => name)
    expect([await seen(atA), await seen(atStamp)]).toEqual([[], []])
    // Judged, and still open, as the stamp stays for ever.
    await giveGrades(db, campaign, a, graders, 'A')
    await giveGrades(db, campaign, stamp, graders, 'A')
    expect([await seen(atA), await seen(atStamp)]).toEqual([[], []])
    await giveGrades(db, campaign, b, graders.slice(1), 'NNN')
    await giveGrades(db, campaign, a, graders.slice(1), 'AAA')
    await runConsensus(db, leads)
    expect([await seen(atA), await seen(atStamp)]).toEqual([['SWS A'], []])
    await db.destroy()
  })

  it('goes by the radius of the own campaign, though that of the other is wider', async () => {
    const { db, otherCampaign, lead, permit, a } = await closeScenario()
    await db.updateTable('campaign').set({ match_radius_arcsec: 60 }).where('id', '=', otherCampaign.id).execute()
    await addImagedCandidate(db, otherCampaign, 'South 1', { raDeg: 150 - 30 / 3600, decDeg: 0 })
    await match(db, otherCampaign.id)
    await addMember(db, otherCampaign, lead, 'viewer', 'S07')
    expect((await candidateMatches(db, await permit(lead, 'read'), a))?.elsewhere).toEqual([])
    await db.destroy()
  })
})

describe('proposed duplicates', () => {
  it('are groups with the nearest first, without what was decided and what was merged', async () => {
    const { db, lead, permit, a, b, c } = await closeScenario()
    const leads = await permit(lead, 'lead')
    const groups = async () =>
      (await duplicatesPage(db, leads)).groups.map(({ members }) => members.map(({ id }) => id))
    const page = await duplicatesPage(db, leads)
    expect(page).toMatchObject({ total: 1, radiusArcsec: 2, merged: [], different: [], due: 0 })
    expect(page.groups[0].members.map(({ name }) => name)).toEqual(['SWS A', 'SWS B', 'SWS C'])
    expect(page.groups[0].widestArcsec).toBeCloseTo(1.4, 6)
    expect(page.groups[0].members[2].separationArcsec).toBeCloseTo(1.4, 6)
    expect(page.groups[0].members[0].known).toMatchObject([{ name: 'Old ring' }])
    await mergeCandidates(db, leads, { kept: a, merged: [b], reason: 'One galaxy.' })
    expect(await groups()).toEqual([[a, c]])
    await decideDifferent(db, leads, { members: [a, c], reason: 'Two galaxies.' })
    expect(await groups()).toEqual([])
    const decided = await duplicatesPage(db, leads)
    expect(decided.merged).toMatchObject([{ keptName: 'SWS A', mergedName: 'SWS B', reason: 'One galaxy.' }])
    expect(decided.different).toMatchObject([{ names: ['SWS A', 'SWS C'], reason: 'Two galaxies.' }])
    await decideDifferent(db, leads, { members: [a, c], reason: 'Look again.' }, 'undecided')
    await partCandidates(db, leads, b, 'Look again.')
    expect(await groups()).toEqual([[a, b, c]])
    await db.destroy()
  })

  it('hang together through others', () => {
    const pair = (firstId: number, secondId: number, separationArcsec: number) => ({
      firstId,
      secondId,
      separationArcsec,
    })
    expect(groupsOfPairs([pair(8, 9, 1.5), pair(1, 2, 0.9), pair(5, 9, 0.3), pair(2, 4, 1.1)])).toEqual([
      { ids: [5, 8, 9], nearestArcsec: 0.3 },
      { ids: [1, 2, 4], nearestArcsec: 0.9 },
    ])
    expect(groupsOfPairs([])).toEqual([])
  })
})

describe('a merge on the pages of both', () => {
  it('shows what was made of the other beside the own, without mixing them', async () => {
    const { db, campaign, lead, permit, graders, a, b } = await closeScenario()
    const leads = await permit(lead, 'lead')
    await giveGrades(db, campaign, b, graders, 'AABB')
    await mergeCandidates(db, leads, { kept: a, merged: [b], reason: 'One galaxy.' })
    const kept = await candidateMatches(db, leads, a)
    expect(kept?.merges).toMatchObject([
      { event: 'merged', isKept: true, holds: true, other: { name: 'SWS B' }, by: 'avocet' },
    ])
    expect(kept?.near.map(({ name }) => name)).toEqual(['SWS C'])
    expect(kept?.histories).toMatchObject([{ name: 'SWS B', isKept: false, judgement: { votes: { A: 2, B: 2 } } }])
    expect((await candidateEvidence(db, leads, a)).judgement?.votes).toMatchObject({ A: 0, B: 0 })
    const merged = await candidateMatches(db, leads, b)
    expect(merged?.merges).toMatchObject([{ isKept: false, other: { name: 'SWS A' } }])
    expect(merged?.near.map(({ name }) => name)).not.toContain('SWS A')
    expect(merged?.histories).toMatchObject([{ name: 'SWS A', isKept: true, judgement: { votes: { A: 0 } } }])
    await partCandidates(db, leads, b, 'Two after all.')
    const parted = await candidateMatches(db, leads, a)
    expect(parted?.merges.map(({ event, holds }) => [event, holds])).toEqual([
      ['merged', false],
      ['parted', false],
    ])
    expect(parted?.histories).toEqual([])
    expect(parted?.near.map(({ name }) => name)).toEqual(['SWS B', 'SWS C'])
    await db.destroy()
  })

  it('names the other to no grader who has not judged it, nor while it is open, neither as a merge nor in the ruling', async () => {
    const { db, campaign, lead, permit, graders, a, b } = await closeScenario()
    const leads = await permit(lead, 'lead')
    const grader = await permit(graders[0], 'grade')
    await giveGrades(db, campaign, b, graders, 'AABB')
    await mergeCandidates(db, leads, { kept: a, merged: [b], reason: 'SWS A shows the counter-image.' })
    const page = await candidateEvidence(db, grader, b)
    expect(JSON.stringify(page)).not.toContain('SWS A')
    expect(page.judgement?.stateReason).toContain('The same object as another candidate: merged into it.')
    expect(await candidateMatches(db, grader, b)).toMatchObject({ merges: [], histories: [] })
    // Judged but open it looks as a calibration stamp does, and nothing merges with one.
    await giveGrades(db, campaign, a, graders, 'AAAA')
    expect(JSON.stringify(await candidateEvidence(db, grader, b))).not.toContain('SWS A')
    await runConsensus(db, leads)
    expect(JSON.stringify(await candidateEvidence(db, grader, b))).toContain('SWS A shows the counter-image.')
    expect(await candidateMatches(db, grader, b)).toMatchObject({ merges: [{ other: { name: 'SWS A' } }] })
    await db.destroy()
  })
})
