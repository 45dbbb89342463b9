import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { giveGrade, giveGrades } from '@/lib/work/consensus/_give-grade'
import { leaveOut } from '@/lib/work/consensus/leave-out'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateEvidence } from './candidate-evidence'

const RULE = { method: 'reliability' as const, gradesWanted: 4, leastGrades: 2, falseConfirmed: 0.01, missedLens: 0.1 }
let scenario: Scenario
let id: number
beforeEach(async () => {
  scenario = await makeScenario(RULE)
  const { db, campaign, graders } = scenario
  for (const [at, letters] of ['AAAA', 'BAAB', 'NNNN', 'NNCN', 'NNNN', 'NCNN'].entries()) {
    const other = await addImagedCandidate(db, campaign, `other-${at}`)
    await giveGrades(db, campaign, other, graders, letters)
  }
  id = await addImagedCandidate(db, campaign, 'case')
  await giveGrades(db, campaign, id, graders, 'AAN')
  await runConsensus(db, await scenario.permit(scenario.lead, 'lead'))
})
afterEach(() => scenario.db.destroy())

async function whyFor(viewer: Viewer) {
  const { judgement } = await candidateEvidence(scenario.db, await scenario.permit(viewer, 'read'), id)
  if (!judgement?.why || !judgement.verdict) throw new Error('no verdict by reliability')
  return { why: judgement.why, verdict: judgement.verdict, judgement }
}

describe('the sum of a verdict by reliability', () => {
  it('comes to the probability of the verdict, under the names that leads see', async () => {
    const { why, verdict } = await whyFor(scenario.lead)
    expect(why.probability).toBeCloseTo(verdict.probability!, 9)
    expect(why.outcome).toBe(verdict.outcome)
    expect(why.steps.map(({ label, grade }) => `${grade} ${label}`).sort()).toEqual([
      'A curlew',
      'A dunlin',
      'N plover',
    ])
    expect(why.steps.at(-1)!.to).toBeCloseTo(why.logOdds, 9)
    expect(why.since).toBeNull()
    expect(why.changes.length).toBeGreaterThan(1)
  })

  it('has pseudonyms for a viewer, and for a grader no number but their own, in the reason neither', async () => {
    await giveGrade(scenario.db, scenario.campaign, id, scenario.graders[3], 'N')
    await runConsensus(scenario.db, await scenario.permit(scenario.lead, 'lead'))
    const viewer = await whyFor(scenario.reader)
    expect(viewer.why.steps.map(({ label }) => label).sort()).toEqual(['G02', 'G03', 'G04', 'G05'])
    const grader = await whyFor(scenario.graders[0])
    expect(grader.why.steps.map(({ label }) => label).sort()).toEqual(['G02', 'The other 3 grades together'])
    expect(JSON.stringify(grader.judgement)).not.toMatch(/odds (times|divided).*G0[345]|G0[345] speaks/)
    expect(grader.judgement.stateReason).not.toMatch(/speaks|Before any grade/)
  })

  it('is not told to a grader while it leaves the candidate open', async () => {
    expect((await whyFor(scenario.lead)).verdict.outcome).toBe('open')
    const { judgement } = await candidateEvidence(scenario.db, await scenario.permit(scenario.graders[0], 'read'), id)
    expect(judgement).toMatchObject({ state: 'open', verdict: null, why: null })
    expect(judgement?.grades).toHaveLength(3)
  })

  it('tells a grader no step where it would be the number of the one other person', async () => {
    const { db, campaign, lead, graders } = scenario
    const pair = await addImagedCandidate(db, campaign, 'pair')
    await giveGrades(db, campaign, pair, graders, 'NN')
    await runConsensus(db, await scenario.permit(lead, 'lead'))
    const seen = async (viewer: Viewer) =>
      (await candidateEvidence(db, await scenario.permit(viewer, 'read'), pair)).judgement
    expect((await seen(lead))?.why?.steps).toHaveLength(2)
    expect(await seen(graders[0])).toMatchObject({ why: null, verdict: { outcome: 'set aside' } })
  })

  it('tells a grader nothing of what came since: with one more grade it would be that person’s number', async () => {
    const { db, campaign, lead, graders } = scenario
    const case3 = await addImagedCandidate(db, campaign, 'case 3')
    await giveGrades(db, campaign, case3, graders, 'NNN')
    await runConsensus(db, await scenario.permit(lead, 'lead'))
    const permit = await scenario.permit(graders[3], 'grade')
    await recordGrade(db, permit, case3, GradeInput.parse({ grade: 'N' }))
    const seen = async (viewer: Viewer) =>
      (await candidateEvidence(db, await scenario.permit(viewer, 'read'), case3)).judgement?.why
    expect((await seen(lead))?.since).toMatchObject({ newGrades: 1 })
    expect(await seen(graders[0])).toMatchObject({ outcome: 'set aside', since: null })
  })

  it('marks the grades of somebody who is left out, for leads and viewers, and for a grader their own alone', async () => {
    const { db, lead, reader, graders, permit } = scenario
    await leaveOut(db, await permit(lead, 'lead'), { personId: graders[1].id, leftOut: true, reason: 'asleep' })
    const marked = async (viewer: Viewer) => {
      const { judgement } = await candidateEvidence(db, await permit(viewer, 'read'), id)
      return judgement?.grades.filter(({ leftOut }) => leftOut).map(({ by }) => by)
    }
    expect(await marked(lead)).toEqual(['dunlin'])
    expect(await marked(reader)).toEqual(['G03'])
    expect(await marked(graders[0])).toEqual([])
    expect(await marked(graders[1])).toEqual(['G03'])
  })

  it('tells apart what came since: the verdict stays, the live estimate moves', async () => {
    const before = await whyFor(scenario.lead)
    const permit = await scenario.permit(scenario.graders[3], 'grade')
    await recordGrade(scenario.db, permit, id, GradeInput.parse({ grade: 'A' }))
    const { why, verdict } = await whyFor(scenario.lead)
    expect(verdict).toEqual(before.verdict)
    expect(why.steps).toEqual(before.why.steps)
    expect(why.since).toMatchObject({ newGrades: 1, newRun: false })
    expect(why.since!.probability).toBeGreaterThan(why.probability)
  })
})
