import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { lendNext } from '@/lib/work/queue/lend-next'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { confusionOf } from './confusion'
import { answerPractice, practiceFirst, practiceState } from './practice'

/** With it the halves of the first three graders are three and three. */
const SECRET = 'secret of tests 19'

let scenario: Scenario
let stamps: number[]
let ordinary: number

beforeEach(async () => {
  scenario = await makeScenario()
  const { db, campaign } = scenario
  await db.insertInto('site').values({ key: 'queue-secret', value: SECRET }).execute()
  ordinary = await addImagedCandidate(db, campaign, 'SWS0001')
  stamps = []
  for (let n = 0; n < 6; n++) stamps.push(await addImagedCandidate(db, campaign, `SWS001${n}`))
  for (const [n, id] of stamps.entries()) {
    const truth = n % 2 === 0 ? ('lens' as const) : ('not a lens' as const)
    await db
      .updateTable('candidate')
      .set({ truth, explanation: `What ${id} is.` })
      .where('id', '=', id)
      .execute()
  }
  await db.updateTable('campaign').set({ practice_wanted: 2 }).execute()
})
afterEach(() => scenario.db.destroy())

const permitOf = (grader: number) => scenario.permit(scenario.graders[grader], 'grade')
const state = async (grader = 0) => practiceState(scenario.db, await permitOf(grader))
const input = (grade: 'A' | 'B' | 'C' | 'N' | 'U', id = 'an-id-of-test') => ({ grade, id, seconds: 3 })
const answer = async (candidateId: number, grade: 'A' | 'N' = 'A', grader = 0) =>
  answerPractice(scenario.db, await permitOf(grader), candidateId, input(grade, `id-${grader}-${candidateId}-x`))

describe('practice', () => {
  it('shows a stamp without its truth, the same one until it is answered', async () => {
    const first = await state()
    expect(stamps).toContain(first.next?.id)
    expect(JSON.stringify(first)).not.toMatch(/"truth"|What \d+ is/)
    expect((await state()).next?.id).toBe(first.next?.id)
    await answer(first.next!.id)
    expect((await state()).next?.id).not.toBe(first.next?.id)
  })

  it('tells truth and explanation after the answer, and the same again when asked again', async () => {
    const { next } = await state()
    const told = await answer(next!.id, 'A')
    expect(told).toMatchObject({ grade: 'A', explanation: `What ${next!.id} is.`, marks: null })
    expect(await answer(next!.id, 'N')).toEqual(told)
    expect((await state()).own.answers).toBe(1)
  })

  it('tells nothing of a candidate that it does not show: of no ordinary one and of no other stamp', async () => {
    const { next } = await state()
    for (const other of [ordinary, ...stamps.filter((id) => id !== next!.id), 999_999]) {
      await expect(answer(other)).rejects.toMatchObject({ status: 409, type: 'not-in-practice' })
    }
    expect(await scenario.db.selectFrom('practice_answer').selectAll().execute()).toEqual([])
  })

  it('never shows what is on the bench or was graded there, nor tells its truth', async () => {
    const { db, campaign } = scenario
    await db.updateTable('campaign').set({ calibration_share: 0.5, practice_wanted: 0 }).execute()
    for (let n = 0; n < 60; n++) await addImagedCandidate(db, campaign, `SWS1${n}`)
    const { candidates } = await lendNext(db, await permitOf(0), 60)
    const onBench = candidates.map(({ id }) => id).filter((id) => stamps.includes(id))
    expect(onBench).toHaveLength(6)
    expect((await state()).next).toBeNull()
    for (const id of onBench.slice(0, 3)) {
      await recordGrade(db, await permitOf(0), id, GradeInput.parse({ grade: 'A' }))
    }
    expect((await state()).next).toBeNull()
    for (const id of onBench) await expect(answer(id)).rejects.toMatchObject({ type: 'not-in-practice' })
  })

  it('leaves half of the stamps for measuring, and never shows a practised one in the queue', async () => {
    const practised: number[] = []
    for (let { next } = await state(); next; { next } = await state()) {
      practised.push(next.id)
      await answer(next.id)
    }
    expect(practised.length).toBe(3)
    await scenario.db.updateTable('campaign').set({ calibration_share: 0.5 }).execute()
    for (let n = 0; n < 60; n++) await addImagedCandidate(scenario.db, scenario.campaign, `SWS1${n}`)
    const seen: number[] = []
    for (;;) {
      const { candidates } = await lendNext(scenario.db, await permitOf(0), 20)
      if (candidates.length === 0) break
      for (const { id } of candidates) {
        seen.push(id)
        await recordGrade(scenario.db, await permitOf(0), id, GradeInput.parse({ grade: 'N' }))
      }
    }
    expect(seen.filter((id) => practised.includes(id))).toEqual([])
    expect(seen.filter((id) => stamps.includes(id)).length).toBe(3)
  })

  it('keeps its half away from the bench from the first stamp that it shows, answered or not', async () => {
    await scenario.db.updateTable('campaign').set({ calibration_share: 0.5, practice_wanted: 0 }).execute()
    for (let n = 0; n < 60; n++) await addImagedCandidate(scenario.db, scenario.campaign, `SWS1${n}`)
    const shown = (await state()).next!.id
    const seen: number[] = []
    for (;;) {
      const { candidates } = await lendNext(scenario.db, await permitOf(0), 20)
      if (candidates.length === 0) break
      for (const { id } of candidates) {
        seen.push(id)
        await recordGrade(scenario.db, await permitOf(0), id, GradeInput.parse({ grade: 'N' }))
      }
    }
    expect(seen).not.toContain(shown)
    expect(seen.filter((id) => stamps.includes(id)).length).toBe(3)
    // Whoever never practised is measured by all.
    const { candidates } = await lendNext(scenario.db, await permitOf(1), 60)
    expect(candidates.filter(({ id }) => stamps.includes(id)).length).toBeGreaterThan(3)
  })

  it('leaves no grade to a stamp that it has told, so that nobody is measured by what they know', async () => {
    const { next } = await state()
    await answer(next!.id)
    await expect(
      recordGrade(scenario.db, await permitOf(0), next!.id, GradeInput.parse({ grade: 'A' })),
    ).rejects.toMatchObject({ status: 409, type: 'judgement-seen' })
    expect(await scenario.db.selectFrom('grade').selectAll().execute()).toEqual([])
  })

  it('refuses an answer whose id belongs to another', async () => {
    const { next } = await state()
    await answer(next!.id)
    const other = (await state()).next!.id
    const taken = input('A', `id-0-${next!.id}-x`)
    await expect(answerPractice(scenario.db, await permitOf(0), other, taken)).rejects.toMatchObject({
      status: 409,
      type: 'grade-id-taken',
    })
  })

  it('comes before a grade too, but for what had been lent already', async () => {
    const grade = GradeInput.parse({ grade: 'N' })
    await expect(recordGrade(scenario.db, await permitOf(2), ordinary, grade)).rejects.toMatchObject({
      status: 409,
      type: 'practice-first',
    })
    await scenario.db.updateTable('campaign').set({ practice_wanted: 0 }).execute()
    await lendNext(scenario.db, await permitOf(2), 5)
    await scenario.db.updateTable('campaign').set({ practice_wanted: 2 }).execute()
    await recordGrade(scenario.db, await permitOf(2), ordinary, grade)
  })

  it('counts in no grade, estimate or number of looks', async () => {
    const { next } = await state()
    await answer(next!.id)
    expect(await scenario.db.selectFrom('grade').selectAll().execute()).toEqual([])
    const { grades_given } = await scenario.db
      .selectFrom('candidate')
      .select('grades_given')
      .where('id', '=', next!.id)
      .executeTakeFirstOrThrow()
    expect(grades_given).toBe(0)
  })

  it('is asked of newcomers before the bench, not of leads nor of whoever has graded', async () => {
    expect(await practiceFirst(scenario.db, await permitOf(0))).toEqual({ wanted: 2, answered: 0 })
    expect(await practiceFirst(scenario.db, await scenario.permit(scenario.lead, 'lead'))).toBeNull()
    for (let n = 0; n < 2; n++) await answer((await state()).next!.id)
    expect(await practiceFirst(scenario.db, await permitOf(0))).toBeNull()
    await lendNext(scenario.db, await permitOf(1), 1)
    await recordGrade(scenario.db, await permitOf(1), ordinary, GradeInput.parse({ grade: 'N' }))
    expect(await practiceFirst(scenario.db, await permitOf(1))).toBeNull()
    expect(await practiceFirst(scenario.db, await permitOf(2))).not.toBeNull()
  })

  it('is not asked where there are no stamps, and says so', async () => {
    await scenario.db.updateTable('candidate').set({ imaged_at: null }).where('truth', 'is not', null).execute()
    expect(await practiceFirst(scenario.db, await permitOf(0))).toBeNull()
    expect(await state()).toMatchObject({ stamps: 0, wanted: 0, next: null })
  })

  it('is closed to viewers and strangers', async () => {
    await expect(scenario.permit(scenario.reader, 'grade')).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.stranger, 'grade')).rejects.toMatchObject({ status: 404 })
  })
})

// Wilson's interval for 8 of 10 at 95 %: 0.4902 to 0.9433 (R. Newcombe 1998, method 3, worked by its formula).
it('a confusion matrix counts by truth and grade, with the share that was seen and its interval', () => {
  const matrix = confusionOf([
    { truth: 'lens', grade: 'A', n: 5 },
    { truth: 'lens', grade: 'C', n: 3 },
    { truth: 'lens', grade: 'N', n: 2 },
    { truth: 'lens', grade: 'U', n: 4 },
    { truth: 'not a lens', grade: 'B', n: 1 },
  ])
  expect(matrix.lens).toEqual([5, 0, 3, 2, 4])
  expect(matrix.notLens).toEqual([0, 1, 0, 0, 0])
  expect(matrix.lensesSeen).toMatchObject({ n: 8, of: 10, share: 0.8 })
  expect(matrix.lensesSeen.interval?.low).toBeCloseTo(0.4902, 3)
  expect(matrix.lensesSeen.interval?.high).toBeCloseTo(0.9433, 3)
  expect(matrix.othersSeen).toMatchObject({ n: 0, of: 1, share: 0 })
  expect(confusionOf([]).lensesSeen.interval).toBeNull()
})
