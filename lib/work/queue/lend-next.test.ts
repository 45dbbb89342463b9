import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { giveBack } from './give-back'
import { LEASE_MS } from './lease-time'
import { lendNext } from './lend-next'

let scenario: Scenario
const ids: number[] = []

beforeEach(async () => {
  vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-03-01T20:00:00Z') })
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  ids.length = 0
  for (let n = 0; n < 4; n++) ids.push(await addImagedCandidate(scenario.db, scenario.campaign, `SWS-${n}`))
})
afterEach(() => vi.useRealTimers())

const permit = (grader: number) => scenario.permit(scenario.graders[grader], 'grade')
const ask = async (grader: number, count = 5) => lendNext(scenario.db, await permit(grader), count)
const lentIds = async (grader: number, count = 5) => (await ask(grader, count)).candidates.map(({ id }) => id)
const give = async (grader: number, id: number) =>
  recordGrade(scenario.db, await permit(grader), id, GradeInput.parse({ grade: 'B' }))
const rule = async (id: number, outcome: 'confirmed' | 'by verdict') => {
  const ruling = await scenario.db
    .insertInto('ruling')
    .values({
      candidate_id: id,
      person_id: scenario.lead.id,
      outcome,
      grade: null,
      reason: 'seen elsewhere',
      created_at: '2026-01-02T00:00:00.000Z',
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  await scenario.db.updateTable('candidate').set({ ruling_id: ruling.id }).where('id', '=', id).execute()
}

describe('the queue', () => {
  it('tells a grader what to look at and nothing of what anybody made of it', async () => {
    await scenario.db.updateTable('candidate').set({ truth: 'lens', score: 0.97 }).where('id', '=', ids[0]).execute()
    await scenario.db.updateTable('candidate').set({ state: 'split' }).where('id', '=', ids[1]).execute()
    await scenario.db.updateTable('campaign').set({ calibration_share: 0 }).execute()
    const answer = await ask(0, 2)
    expect(answer).toMatchObject({ given: 0, left: 3, imaged: true, until: '2026-03-01T20:20:00.000Z' })
    expect(Object.keys(answer.candidates[0]).sort()).toEqual([
      'closeFieldArcsec',
      'decDeg',
      'geometry',
      'id',
      'name',
      'planesUrl',
      'raDeg',
      'recipe',
      'views',
    ])
    expect(JSON.stringify(answer)).not.toMatch(/0\.97|split|truth|grades/)
  })

  it('gives the same candidates in the same order when asked again, renewed, then new ones', async () => {
    expect(await lentIds(0, 2)).toEqual(ids.slice(0, 2))
    vi.setSystemTime(new Date('2026-03-01T20:10:00Z'))
    const again = await ask(0, 3)
    expect(again.candidates.map(({ id }) => id)).toEqual(ids.slice(0, 3))
    expect(again.until).toBe('2026-03-01T20:30:00.000Z')
    const untils = await scenario.db.selectFrom('lease').select('until').distinct().execute()
    expect(untils).toEqual([{ until: '2026-03-01T20:30:00.000Z' }])
  })

  it('serves first what is nearest to its wanted number', async () => {
    await give(1, ids[2])
    expect(await lentIds(0, 2)).toEqual([ids[2], ids[0]])
  })

  it('never lends a candidate to more people than it wants grades, and frees the place of a lapsed lease', async () => {
    expect(await lentIds(0, 1)).toEqual([ids[0]])
    expect(await lentIds(1, 1)).toEqual([ids[0]])
    expect(await lentIds(2, 1)).toEqual([ids[1]])
    vi.setSystemTime(new Date(Date.now() + LEASE_MS))
    expect(await lentIds(3, 1)).toEqual([ids[0]])
  })

  it('frees places at once when a grader gives them back, all or by name', async () => {
    await ask(0, 2)
    await ask(1, 2)
    expect(await lentIds(2)).toEqual([ids[2], ids[3]])
    expect(await giveBack(scenario.db, await permit(0), [ids[1]])).toEqual({ returned: 1 })
    expect(await lentIds(2)).toEqual([ids[2], ids[3], ids[1]])
    expect(await giveBack(scenario.db, await permit(0))).toEqual({ returned: 1 })
    expect(await lentIds(2)).toEqual([ids[2], ids[3], ids[1], ids[0]])
  })

  it('gives back nobody else’s', async () => {
    await ask(0, 2)
    expect(await giveBack(scenario.db, await permit(1), ids)).toEqual({ returned: 0 })
    expect(await lentIds(0, 2)).toEqual(ids.slice(0, 2))
  })

  it('never shows a person what they have graded, nor what is full', async () => {
    await give(0, ids[0])
    expect(await lentIds(0)).toEqual(ids.slice(1))
    await give(1, ids[0])
    expect(await lentIds(2)).toEqual(ids.slice(1))
  })

  it('leaves out what has no pictures and what a standing ruling decided, but not what a verdict did', async () => {
    await scenario.db.updateTable('candidate').set({ imaged_at: null }).where('id', '=', ids[0]).execute()
    await scenario.db.updateTable('candidate').set({ state: 'confirmed' }).where('id', '=', ids[1]).execute()
    await rule(ids[2], 'confirmed')
    expect(await lentIds(0)).toEqual([ids[1], ids[3]])
    await rule(ids[2], 'by verdict')
    expect(await lentIds(0)).toEqual([ids[1], ids[3], ids[2]])
  })

  it('counts what is left with the candidates that are on other people’s benches', async () => {
    await ask(0, 4)
    await ask(1, 4)
    expect(await ask(2)).toMatchObject({ candidates: [], left: 4, given: 0 })
  })

  it('says when the campaign has nothing imaged', async () => {
    await scenario.db.updateTable('candidate').set({ imaged_at: null }).execute()
    expect(await ask(0)).toMatchObject({ candidates: [], left: 0, imaged: false })
  })

  it('is closed to viewers and strangers', async () => {
    await expect(scenario.permit(scenario.reader, 'grade')).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.stranger, 'grade')).rejects.toMatchObject({ status: 404 })
  })
})
