import { describe, expect, it } from 'vitest'
import { toJson } from '@/db/schema/values'
import { giveGrade, giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { MessageInput } from '@/lib/work/discussion/message-input'
import { postMessage } from '@/lib/work/discussion/post-message'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import { candidateEvidence } from './candidate-evidence'
import { candidateName } from './candidate-name'
import { neighboursOf } from './find-neighbours'
import { listSplitCases } from './list-splits'
import { ruleOnCandidate } from './rule-on-candidate'

const RULE = { gradesWanted: 4, leastGrades: 3, confirmMean: 2, setAsideMean: 1, splitSpread: 1 }

async function gradedCase() {
  const scenario = await makeScenario(RULE, 5)
  const { db, campaign, graders } = scenario
  const id = await addImagedCandidate(db, campaign, 'torn', { raDeg: 10, decDeg: -5 })
  const more = { tags: toJson(['merger']), remark: 'Tidal tail?', seconds: 8.5 }
  await giveGrade(db, campaign, id, graders[0], 'N', more)
  await giveGrade(db, campaign, id, graders[1], 'A')
  const first = await giveGrade(db, campaign, id, graders[2], 'N')
  await giveGrade(db, campaign, id, graders[2], 'A', { replaces: first })
  await giveGrade(db, campaign, id, graders[2], 'C', { occasion: 'repeat' })
  const lead = await scenario.permit(scenario.lead, 'lead')
  await runConsensus(db, lead)
  return { ...scenario, id, leads: lead, leadReads: await scenario.permit(scenario.lead, 'read') }
}

describe('the evidence of a candidate', () => {
  it('shows a lead every counted grade with the name, the verdict with its rule, and what caused the state', async () => {
    const { db, id, leadReads } = await gradedCase()
    const { judgement } = await candidateEvidence(db, leadReads, id)
    expect(judgement?.votes).toEqual({ A: 2, B: 0, C: 0, N: 1, U: 0 })
    expect(judgement?.grades.map(({ by, grade }) => `${by} ${grade}`)).toEqual(['dunlin A', 'plover A', 'curlew N'])
    expect(judgement?.grades[2]).toMatchObject({ tags: ['merger'], remark: 'Tidal tail?', seconds: 8.5 })
    expect(judgement?.verdict).toMatchObject({ outcome: 'split', mean: 2, rule: { version: 1, confirmMean: 2 } })
    expect(judgement?.stateReason).toMatch(/^Split: grades A, A, N/)
    expect(judgement?.history).toMatchObject([{ from: 'open', to: 'split', cause: 'verdict' }])
  })

  it('gives a viewer pseudonyms, also of the lead who ruled, and no name anywhere', async () => {
    const { db, id, leads, reader, permit } = await gradedCase()
    await ruleOnCandidate(db, leads, id, { outcome: 'confirmed', grade: 'B', reason: 'Real.' })
    const evidence = await candidateEvidence(db, await permit(reader, 'read'), id)
    expect(evidence.judgement?.grades.map(({ by }) => by)).toEqual(['G03', 'G04', 'G02'])
    expect(evidence.judgement?.rulings.map(({ by }) => by)).toEqual(['G01'])
    expect(evidence.judgement).toMatchObject({ stateReason: 'Ruling by G01: confirmed as B. “Real.”' })
    expect(JSON.stringify(evidence)).not.toMatch(/avocet|curlew|dunlin|plover/)
    expect(evidence.judgement?.designation).toBe('SWS J004000.00-050000.0')
  })

  it('keeps what came late apart: for leads, and of a person their own', async () => {
    const { db, campaign, id, graders, leadReads, permit, reader } = await gradedCase()
    const first = await giveGrade(db, campaign, id, graders[4], 'C', { occasion: 'late' })
    await giveGrade(db, campaign, id, graders[4], 'B', { occasion: 'late', replaces: first, remark: 'On the train' })
    const shown = async (viewer: Parameters<typeof candidateEvidence>[1]) => {
      const { judgement } = await candidateEvidence(db, viewer, id)
      return { counted: judgement?.grades.length, late: judgement?.late.map(({ by, grade, own }) => [by, grade, own]) }
    }
    expect(await shown(leadReads)).toEqual({ counted: 3, late: [['godwit', 'B', false]] })
    expect(await shown(await permit(graders[4], 'read'))).toEqual({ counted: 3, late: [['G06', 'B', true]] })
    expect(await shown(await permit(graders[0], 'read'))).toEqual({ counted: 3, late: [] })
    expect(await shown(await permit(reader, 'read'))).toEqual({ counted: 3, late: [] })
  })

  it('is withheld from a grader who has not judged it, and shown with pseudonyms to one who has', async () => {
    const { db, id, graders, permit } = await gradedCase()
    const blind = await candidateEvidence(db, await permit(graders[4], 'read'), id)
    expect(blind.judgement).toBeNull()
    expect(JSON.stringify(blind)).not.toMatch(/split|merger|Tidal|mean/)
    const seen = await candidateEvidence(db, await permit(graders[0], 'read'), id)
    expect(seen.judgement?.grades.map(({ by, own }) => [by, own])).toEqual([
      ['G03', false],
      ['G04', false],
      ['G02', true],
    ])
  })

  it('never carries the truth of a calibration candidate; that it is one is told to leads only', async () => {
    const { db, campaign, graders, permit, leadReads } = await gradedCase()
    const known = await addImagedCandidate(db, campaign, 'known')
    await db.updateTable('candidate').set({ truth: 'not a lens' }).where('id', '=', known).execute()
    await giveGrade(db, campaign, known, graders[0], 'A')
    for (const reads of [leadReads, await permit(graders[0], 'read')]) {
      const evidence = await candidateEvidence(db, reads, known)
      expect(JSON.stringify(evidence)).not.toContain('not a lens')
      expect(evidence.judgement?.calibration).toBe(reads === leadReads)
    }
  })

  it('of a calibration candidate shows a grader their own grade, and those of people who wrote in its discussion', async () => {
    const { db, campaign, graders, permit, leadReads } = await gradedCase()
    const known = await addImagedCandidate(db, campaign, 'known')
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', known).execute()
    await giveGrades(db, campaign, known, graders, 'ABBBN')
    const reads = await permit(graders[0], 'read')
    const seen = async (by = reads) => (await candidateEvidence(db, by, known)).judgement
    expect(await seen()).toMatchObject({
      state: 'open',
      votes: { A: 1, B: 0, C: 0, N: 0, U: 0 },
      grades: [{ own: true }],
    })
    expect((await seen(leadReads))?.grades).toHaveLength(5)
    await postMessage(db, await permit(graders[4], 'grade'), known, MessageInput.parse({ body: 'A disk.' }))
    expect((await seen())?.grades.map(({ by, grade }) => `${by} ${grade}`)).toEqual(['G02 A', 'G06 N'])
  })

  it('of a calibration candidate is not there for a viewer, neither by its number nor by turning pages', async () => {
    const { db, campaign, reader, permit, leadReads, id } = await gradedCase()
    const known = await addImagedCandidate(db, campaign, 'known')
    const after = await addImagedCandidate(db, campaign, 'after')
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', known).execute()
    const reads = await permit(reader, 'read')
    await expect(candidateEvidence(db, reads, known)).rejects.toMatchObject({ status: 404 })
    expect(await candidateName(db, reads, known)).toBeNull()
    expect(await candidateName(db, leadReads, known)).toBe('known')
    // By name, whenever they came: after, known, torn.
    expect(await neighboursOf(db, reads, id)).toEqual({ previous: { id: after, name: 'after' }, next: null })
    expect(await neighboursOf(db, reads, after)).toEqual({ previous: null, next: { id, name: 'torn' } })
    expect((await neighboursOf(db, leadReads, id)).previous).toEqual({ id: known, name: 'known' })
  })

  it('keeps redshifts, which tell that somebody took it for a lens, until the grader has judged', async () => {
    const { db, graders, permit, id } = await gradedCase()
    await db
      .updateTable('candidate')
      .set({ lens_redshift: 0.512, source_redshift: 2.345 })
      .where('id', '=', id)
      .execute()
    const blind = await candidateEvidence(db, await permit(graders[4], 'read'), id)
    expect(JSON.stringify(blind)).not.toMatch(/0\.512|2\.345/)
    const { judgement } = await candidateEvidence(db, await permit(graders[0], 'read'), id)
    expect(judgement).toMatchObject({ lensRedshift: 0.512, sourceRedshift: 2.345 })
  })

  it('is not found in another campaign', async () => {
    const { db, otherCampaign, leadReads } = await gradedCase()
    const there = await addImagedCandidate(db, otherCampaign, 'there')
    await expect(candidateEvidence(db, leadReads, there)).rejects.toMatchObject({ status: 404 })
  })
})

describe('the list of splits', () => {
  it('has first what is worth most to settle, with votes, and what was ruled last below', async () => {
    const { db, campaign, graders, leads, id } = await gradedCase()
    const low = await addImagedCandidate(db, campaign, 'low')
    for (const [index, grade] of (['N', 'N', 'A', 'N'] as const).entries()) {
      await giveGrade(db, campaign, low, graders[index], grade)
    }
    await runConsensus(db, leads)
    const before = await listSplitCases(db, leads)
    expect(before).toMatchObject({ total: 2, ruled: [] })
    expect(before.cases.map(({ name, mean }) => [name, mean])).toEqual([
      ['torn', 2],
      ['low', 0.75],
    ])
    expect(before.cases[1].votes).toEqual({ A: 1, B: 0, C: 0, N: 3, U: 0 })
    await ruleOnCandidate(db, leads, id, { outcome: 'set aside', grade: null, reason: 'Tail.' })
    const after = await listSplitCases(db, leads)
    expect(after.cases.map(({ name }) => name)).toEqual(['low'])
    expect(after.ruled).toMatchObject([{ name: 'torn', outcome: 'set aside', by: 'avocet', state: 'set aside' }])
  })
})
