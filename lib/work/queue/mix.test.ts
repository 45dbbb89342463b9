import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveBack } from './give-back'
import { lendNext } from './lend-next'
import { kindOf, mix, mixedAhead } from './mix'
import { PersonStream } from './person-stream'

const SHARES = { calibration: 0.1, repeat: 0.05 }

describe('the draws of a queue', () => {
  // The number of stamps among n looks is binomial: mean n p, standard deviation sqrt(n p (1 - p)). Four of them, 1 in 16,000.
  it('keep the share within binomial bounds over 2,000 looks, for each of many people', () => {
    for (let person = 1; person <= 25; person++) {
      const stream = new PersonStream('a secret', 7, person)
      const kinds = Array.from({ length: 2000 }, (_, place) => kindOf(stream.at(place), SHARES))
      for (const [kind, share] of [
        ['stamp', 0.1],
        ['repeat', 0.05],
      ] as const) {
        const found = kinds.filter((one) => one === kind).length
        expect(Math.abs(found - 2000 * share)).toBeLessThan(4 * Math.sqrt(2000 * share * (1 - share)))
      }
    }
  })

  // Of independent draws the gaps are geometric: mean 1 / p, variance (1 - p) / p^2; a gap of 1 has the probability p.
  it('leave geometric gaps: no pattern to be learned', () => {
    const stream = new PersonStream('a secret', 7, 1)
    const places = Array.from({ length: 40_000 }, (_, place) => place).filter(
      (place) => kindOf(stream.at(place), SHARES) === 'stamp',
    )
    const gaps = places.slice(1).map((place, k) => place - places[k])
    const mean = gaps.reduce((sum, gap) => sum + gap, 0) / gaps.length
    const variance = gaps.reduce((sum, gap) => sum + (gap - mean) ** 2, 0) / gaps.length
    expect(Math.abs(mean - 10)).toBeLessThan(0.7)
    expect(Math.abs(variance / 90 - 1)).toBeLessThan(0.15)
    expect(Math.abs(gaps.filter((gap) => gap === 1).length / gaps.length - 0.1)).toBeLessThan(0.02)
  })

  it('differ between people, campaigns and sites, and are the same when asked again', () => {
    const kinds = (secret: string, campaign: number, person: number) => {
      const stream = new PersonStream(secret, campaign, person)
      return Array.from({ length: 200 }, (_, place) => kindOf(stream.at(place), SHARES)).join()
    }
    expect(kinds('a', 1, 1)).toBe(kinds('a', 1, 1))
    expect(new Set([kinds('a', 1, 1), kinds('b', 1, 1), kinds('a', 2, 1), kinds('a', 1, 2)]).size).toBe(4)
  })
})

describe('mixing', () => {
  const always = () => ({ kind: 0, pick: 0.99 })
  const never = () => ({ kind: 0.99, pick: 0 })

  it('puts an ordinary one where stamps have run out, and ends with the ordinary ones', () => {
    const supplies = { ordinary: ['o1', 'o2'], stamps: ['s1'], repeats: [] as string[] }
    expect(mix(supplies, always, 0, 5, SHARES).map(({ item }) => item)).toEqual(['s1', 'o1', 'o2'])
    expect(mix({ ...supplies, ordinary: [] }, always, 0, 5, SHARES)).toEqual([])
    expect(mix(supplies, never, 0, 5, SHARES).map(({ item }) => item)).toEqual(['o1', 'o2'])
  })

  it('tells how many stamps are still to come, exactly as they will', () => {
    const stream = new PersonStream('a secret', 3, 4)
    const drawAt = (place: number) => stream.at(place)
    const supplies = {
      ordinary: Array.from({ length: 300 }, (_, k) => k),
      stamps: Array.from({ length: 20 }, (_, k) => 1000 + k),
      repeats: [],
    }
    const shares = { calibration: 0.1, repeat: 0 }
    const queue = mix(supplies, drawAt, 17, 1000, shares)
    const stamps = queue.filter(({ kind }) => kind === 'stamp').length
    expect(mixedAhead({ ordinary: 300, stamps: 20, repeats: 0, recent: [], between: 20 }, drawAt, 17, shares)).toBe(
      stamps,
    )
    expect(queue.length).toBe(300 + stamps)
  })
})

describe('calibration stamps in the queue', () => {
  let scenario: Scenario
  let ordinary: number[]
  let stamps: number[]

  beforeEach(async () => {
    scenario = await makeScenario({ gradesWanted: 1, leastGrades: 1 }, 3)
    ordinary = []
    stamps = []
    const { db, campaign } = scenario
    for (let n = 0; n < 60; n++) ordinary.push(await addImagedCandidate(db, campaign, `SWS-${n}`))
    for (let n = 0; n < 12; n++) stamps.push(await addImagedCandidate(db, campaign, `SWS-9${n}`))
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', 'in', stamps).execute()
    await db.updateTable('campaign').set({ calibration_share: 0.3 }).execute()
    await db.insertInto('site').values({ key: 'queue-secret', value: 'known to this test' }).execute()
  })
  afterEach(() => scenario.db.destroy())

  const ask = async (grader: number, count = 5) =>
    lendNext(scenario.db, await scenario.permit(scenario.graders[grader], 'grade'), count)
  const grade = async (grader: number, id: number, letter = 'N') =>
    recordGrade(
      scenario.db,
      await scenario.permit(scenario.graders[grader], 'grade'),
      id,
      GradeInput.parse({ grade: letter }),
    )

  async function gradeAll(grader: number, most = 1000): Promise<number[]> {
    const seen: number[] = []
    for (;;) {
      const { candidates } = await ask(grader)
      if (candidates.length === 0 || seen.length >= most) return seen
      seen.push(candidates[0].id)
      await grade(grader, candidates[0].id)
    }
  }

  it('come once to each person, until they have run out, and the ordinary ones still come to all their looks', async () => {
    const seen = await gradeAll(0)
    expect(new Set(seen).size).toBe(seen.length)
    expect(seen.filter((id) => ordinary.includes(id)).length).toBe(60)
    expect(seen.filter((id) => stamps.includes(id)).length).toBeGreaterThan(6)
  })

  it('come to everybody, however many looks are wanted of a candidate', async () => {
    const first = await gradeAll(0, 25)
    const second = await gradeAll(1, 25)
    const both = stamps.filter((id) => first.includes(id) && second.includes(id))
    expect(both.length).toBeGreaterThan(0)
    expect(ordinary.filter((id) => first.includes(id) && second.includes(id))).toEqual([])
    const { grades_given } = await scenario.db
      .selectFrom('candidate')
      .select('grades_given')
      .where('id', '=', both[0])
      .executeTakeFirstOrThrow()
    expect(grades_given).toBe(2)
  })

  it('make no difference to what is left: each look takes one off', async () => {
    let { left } = await ask(0)
    for (let n = 0; n < 40; n++) {
      const { candidates } = await ask(0)
      await grade(0, candidates[0].id)
      const after = await ask(0)
      expect(after.left).toBe(left - 1)
      left = after.left
    }
  })

  it('cannot be told apart in what is sent: the same members of the same types', async () => {
    const { candidates } = await ask(0, 20)
    expect(candidates.some(({ id }) => stamps.includes(id))).toBe(true)
    expect(candidates.some(({ id }) => ordinary.includes(id))).toBe(true)
    const shapeOf = (value: unknown): unknown =>
      Array.isArray(value)
        ? value.map(shapeOf)
        : value !== null && typeof value === 'object'
          ? Object.entries(value).map(([key, inner]) => [key, shapeOf(inner)])
          : value === null
            ? 'null'
            : typeof value
    expect(new Set(candidates.map((candidate) => JSON.stringify(shapeOf(candidate)))).size).toBe(1)
  })

  it('stand where they stood when the bench is left and opened again', async () => {
    const before = (await ask(0)).candidates.map(({ id }) => stamps.includes(id))
    await giveBack(scenario.db, await scenario.permit(scenario.graders[0], 'grade'))
    expect((await ask(0)).candidates.map(({ id }) => stamps.includes(id))).toEqual(before)
  })

  it('are not served to whom practice has shown them', async () => {
    await scenario.db
      .insertInto('practice_answer')
      .values(
        stamps.map((id) => ({
          uid: `practised-${id}`,
          campaign_id: scenario.campaign.id,
          candidate_id: id,
          person_id: scenario.graders[0].id,
          grade: 'A' as const,
          seconds: null,
          given_at: '2026-01-01T00:00:00.000Z',
        })),
      )
      .execute()
    const seen = await gradeAll(0)
    expect(seen.sort((a, b) => a - b)).toEqual(ordinary)
  })

  it('are not mixed in at a share of 0', async () => {
    await scenario.db.updateTable('campaign').set({ calibration_share: 0 }).execute()
    expect((await gradeAll(0, 30)).every((id) => ordinary.includes(id))).toBe(true)
  })
})
