import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { giveGrades } from '@/lib/work/consensus/_give-grade'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import type { Viewer } from '@/lib/work/people/viewer'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateEvidence } from './candidate-evidence'

const RULE = { method: 'reliability' as const, mostLooks: 4, leastGrades: 2, falseConfirmed: 0.01, missedLens: 0.1 }
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
    const viewer = await whyFor(scenario.reader)
    expect(viewer.why.steps.map(({ label }) => label).sort()).toEqual(['G02', 'G03', 'G04'])
    const grader = await whyFor(scenario.graders[0])
    expect(grader.why.steps.map(({ label }) => label).sort()).toEqual(['G02', 'The other 2 grades together'])
    expect(JSON.stringify(grader.judgement)).not.toMatch(/odds (times|divided).*G0[34]|G0[34] speaks/)
    expect(grader.judgement.stateReason).not.toMatch(/speaks|Before any grade/)
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
