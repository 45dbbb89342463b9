import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { noteShown } from '@/lib/work/grading/may-reveal'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveBack } from './give-back'
import { lendNext, type BenchCandidate } from './lend-next'
import { LOOKS_BETWEEN } from './repeats'

let scenario: Scenario
const CANDIDATES = 90

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 1 }, 3)
  const { db, campaign } = scenario
  for (let n = 0; n < CANDIDATES; n++) await addImagedCandidate(db, campaign, `SWS-${n}`)
  await db.updateTable('campaign').set({ repeat_share: 0.2, calibration_share: 0 }).execute()
  await db.insertInto('site').values({ key: 'queue-secret', value: 'known to this test' }).execute()
})
afterEach(() => scenario.db.destroy())

const permitOf = (grader: number) => scenario.permit(scenario.graders[grader], 'grade')
const ask = async (grader: number, count = 5) => lendNext(scenario.db, await permitOf(grader), count)
const answer = async (grader: number, { id, turned }: BenchCandidate, letter = 'N') =>
  recordGrade(
    scenario.db,
    await permitOf(grader),
    id,
    GradeInput.parse({ grade: letter, ...(turned ? { turned } : {}) }),
  )

/** Looks at one candidate after the other, and what each was. */
async function lookOn(grader: number, looks = 1000): Promise<{ id: number; turned: number | undefined }[]> {
  const seen: { id: number; turned: number | undefined }[] = []
  while (seen.length < looks) {
    const [next] = (await ask(grader)).candidates
    if (!next) break
    seen.push({ id: next.id, turned: next.turned })
    await answer(grader, next)
  }
  return seen
}

describe('own candidates that come back', () => {
  it('come back once, turned, no sooner than twenty looks later', async () => {
    const seen = await lookOn(0)
    const repeats = seen.flatMap((look, at) => (look.turned ? { ...look, at } : []))
    expect(repeats.length).toBeGreaterThan(8)
    for (const { id, at, turned } of repeats) {
      const first = seen.findIndex((look) => look.id === id)
      expect(seen[first].turned).toBeUndefined()
      expect(at - first).toBeGreaterThanOrEqual(LOOKS_BETWEEN - 5)
      expect(turned).toBeGreaterThanOrEqual(1)
      expect(turned).toBeLessThanOrEqual(7)
    }
    expect(new Set(repeats.map(({ id }) => id)).size).toBe(repeats.length)
    expect(new Set(repeats.map(({ turned }) => turned)).size).toBeGreaterThan(2)
    expect(seen.length - repeats.length).toBe(CANDIDATES)
  })

  it('take no place: the wanted number of people see every candidate, whoever had it back', async () => {
    for (const grader of [0, 1]) await lookOn(grader)
    const rows = await scenario.db.selectFrom('candidate').select('grades_given').execute()
    expect(rows.every(({ grades_given }) => grades_given === 2)).toBe(true)
    expect(await scenario.db.selectFrom('lease').selectAll().execute()).toEqual([])
    expect((await ask(2)).candidates).toEqual([])
  })

  it('wait for their answer: asked again and after leaving they are there, turned as before', async () => {
    await lookOn(0, 40)
    let waiting: BenchCandidate | undefined
    for (let n = 0; n < 40 && !waiting; n++) {
      const { candidates } = await ask(0)
      waiting = candidates.find(({ turned }) => turned)
      if (!waiting) await answer(0, candidates[0])
    }
    await giveBack(scenario.db, await permitOf(0))
    const again = (await ask(0)).candidates.find(({ id }) => id === waiting?.id)
    expect(again?.turned).toBe(waiting?.turned)
  })

  it('come back scattered after leaving, not all at once', async () => {
    await lookOn(0, 30)
    const far = (await ask(0, 50)).candidates.map(({ turned }) => Boolean(turned))
    expect(far.filter(Boolean).length).toBeGreaterThan(4)
    await giveBack(scenario.db, await permitOf(0))
    expect((await ask(0, 50)).candidates.map(({ turned }) => Boolean(turned))).toEqual(far)
    await giveBack(scenario.db, await permitOf(0))
    const first = (await ask(0, 5)).candidates.map(({ turned }) => Boolean(turned))
    expect(first).toEqual(far.slice(0, 5))
  })

  it('lapse when the campaign asks for none any more', async () => {
    await lookOn(0, 30)
    expect((await ask(0, 50)).candidates.some(({ turned }) => turned)).toBe(true)
    await scenario.db.updateTable('campaign').set({ repeat_share: 0 }).execute()
    expect((await ask(0, 50)).candidates.some(({ turned }) => turned)).toBe(false)
  })

  it('are not told as still to come when none is left to come back', async () => {
    await lookOn(0, 30)
    await noteShown(
      scenario.db,
      await scenario.permit(scenario.graders[0], 'read'),
      (await scenario.db.selectFrom('grade').select('candidate_id').execute()).map(({ candidate_id }) => candidate_id),
    )
    await scenario.db.updateTable('campaign').set({ repeat_share: 0.2 }).execute()
    const { left } = await ask(0)
    const seen = await lookOn(0)
    // What comes back of the looks still to be given is foreseen up to what the answers are.
    expect(Math.abs(seen.length - left)).toBeLessThanOrEqual(2)
  })

  it('do not come once the person has been shown what others made of them while they waited', async () => {
    await lookOn(0, 30)
    const waiting = (await ask(0, 50)).candidates.filter(({ turned }) => turned)
    await noteShown(
      scenario.db,
      await scenario.permit(scenario.graders[0], 'read'),
      waiting.map(({ id }) => id),
    )
    const now = (await ask(0, 50)).candidates.filter(({ turned }) => turned).map(({ id }) => id)
    expect(waiting.filter(({ id }) => now.includes(id))).toEqual([])
    await expect(answer(0, waiting[0])).rejects.toMatchObject({ status: 409, type: 'judgement-seen' })
  })

  it('are shown with their compass turned along', async () => {
    const { db } = scenario
    await lookOn(0, 30)
    const [{ candidate_id }] = await db.selectFrom('grade').select('candidate_id').orderBy('id').limit(1).execute()
    await db.deleteFrom('repeat_look').execute()
    await db
      .insertInto('repeat_look')
      .values({
        campaign_id: scenario.campaign.id,
        candidate_id,
        person_id: scenario.graders[0].id,
        turned: 4,
        lent_at: '2026-01-01T00:00:00.000Z',
        grade_id: null,
      })
      .execute()
    const shown = (await ask(0, 40)).candidates.find(({ id }) => id === candidate_id)
    expect(shown?.turned).toBe(4)
    expect(shown?.geometry.eastLeft).toBe(false)
  })

  it('leave each look to take one off what is left', async () => {
    await lookOn(0, 30)
    let { left } = await ask(0)
    for (let n = 0; n < 30; n++) {
      const [next] = (await ask(0)).candidates
      await answer(0, next)
      const after = await ask(0)
      expect(after.left).toBe(left - 1)
      left = after.left
    }
  })

  it('are none of those whose judgement the person has been shown since', async () => {
    await lookOn(0, 30)
    const { db } = scenario
    await db.deleteFrom('repeat_look').where('grade_id', 'is', null).execute()
    const graded = await db.selectFrom('grade').select('candidate_id').execute()
    const ids = graded.map(({ candidate_id }) => candidate_id)
    await noteShown(db, await scenario.permit(scenario.graders[0], 'read'), ids)
    const later = await lookOn(0, 20)
    expect(later.filter(({ turned }) => turned)).toEqual([])
  })

  it('do not come at a share of 0', async () => {
    await scenario.db.updateTable('campaign').set({ repeat_share: 0 }).execute()
    expect((await lookOn(0, 60)).filter(({ turned }) => turned)).toEqual([])
  })
})
