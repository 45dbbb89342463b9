import { describe, expect, it } from 'vitest'
import { giveGrade } from '@/lib/work/consensus/_give-grade'
import { estimateFinish } from './finish-estimate'
import { looksToCome } from './progress'
import { computedReport, reportScenario } from './_report-scenario'

const NOW = Date.parse('2026-03-08T12:00:00.000Z')
const DAY = 86_400_000
const looks = (perDay: readonly number[]) =>
  perDay.flatMap((count, ago) => Array.from({ length: count }, () => NOW - ago * DAY - DAY / 2))
const remaining = { expected: 100, least: 100, most: 100 }

describe('the estimated finish', () => {
  it('divides the looks to come by the mean of the last seven days', () => {
    // By hand: ten looks each day, 100 to come, so ten days; a steady pace has no width.
    const found = estimateFinish(looks([10, 10, 10, 10, 10, 10, 10, 500]), 570, remaining, NOW)
    expect(found.lastDays).toEqual([10, 10, 10, 10, 10, 10, 10])
    expect(found.pace).toEqual({ value: 10, low: 10, high: 10 })
    expect(found.finish).toEqual({
      early: '2026-03-18T12:00:00.000Z',
      likely: '2026-03-18T12:00:00.000Z',
      late: '2026-03-18T12:00:00.000Z',
    })
  })

  it('takes quiet days into the pace and widens the range by them', () => {
    const found = estimateFinish(looks([14, 0, 28, 0, 14, 0, 14]), 70, remaining, NOW)
    expect(found.pace?.value).toBe(10)
    expect(found.pace!.low).toBeLessThan(6)
    expect(found.pace!.high).toBeGreaterThan(14)
    expect(found.finish!.early < found.finish!.likely && found.finish!.likely < found.finish!.late!).toBe(true)
  })

  it('takes the fast end with the least looks to come and the slow end with the most', () => {
    const steady = looks([10, 10, 10, 10, 10, 10, 10])
    const found = estimateFinish(steady, 70, { expected: 100, least: 50, most: 200 }, NOW)
    expect(found.finish).toEqual({
      early: '2026-03-13T12:00:00.000Z',
      likely: '2026-03-18T12:00:00.000Z',
      late: '2026-03-28T12:00:00.000Z',
    })
  })

  it('says why there is none: nobody looked lately, too few days, or nothing is left', () => {
    expect(estimateFinish([], 0, remaining, NOW)).toMatchObject({
      finish: null,
      reason: expect.stringContaining('nobody'),
    })
    expect(estimateFinish(looks([50, 0, 0, 50]), 100, remaining, NOW)).toMatchObject({
      pace: null,
      reason: 'No estimate: looks were given on only two of the last 7 days, which is no pace yet.',
    })
    const none = { expected: 0, least: 0, most: 0 }
    expect(estimateFinish(looks([1, 1, 1]), 3, none, NOW).reason).toBe('No look is wanting.')
  })
})

describe('the looks to come', () => {
  const candidate = {
    id: 1,
    truth: null,
    score: null,
    state: 'open',
    imaged: 1,
    settled: 0,
    given: 0,
    asked: 0,
    ruled: 0,
    pass: 'sent on',
  } as const

  it('are by the mean rule what is missing of the wanted number, none where a ruling has decided or no picture is', () => {
    const rule = { method: 'mean', gradesWanted: 6, leastGrades: 4 } as const
    const candidates = [
      { ...candidate, given: 2 },
      { ...candidate, given: 6 },
      { ...candidate, given: 6, asked: 7 },
      { ...candidate, ruled: 1 as const },
      { ...candidate, imaged: 0 as const },
      { ...candidate, truth: 'lens' as const },
    ]
    expect(looksToCome(candidates, rule)).toEqual({ expected: 5, least: 5, most: 5 })
  })

  it('are none where the first pass did not send on, and of what waits for it as many as it has sent on so far', () => {
    const rule = { method: 'mean', gradesWanted: 4, leastGrades: 2 } as const
    const waiting = { ...candidate, pass: 'waiting' as const }
    const dropped = { ...candidate, pass: 'dropped' as const }
    expect(looksToCome([dropped], rule)).toEqual({ expected: 0, least: 0, most: 0 })
    expect(looksToCome([waiting, waiting], rule)).toEqual({ expected: 8, least: 0, most: 8 })
    // One of four was sent on: of two that wait, 2 x 4 / 4 = 2 looks beside the 4 of that one.
    expect(looksToCome([candidate, dropped, dropped, dropped, waiting, waiting], rule)).toEqual({
      expected: 6,
      least: 4,
      most: 12,
    })
  })

  it('are by reliability at least one, at most all, and expected from what each look decided of those that came to it', () => {
    const rule = { method: 'reliability', gradesWanted: 10, leastGrades: 2 } as const
    const candidates = [
      { ...candidate, given: 4, settled: 1 as const },
      { ...candidate, given: 2, settled: 1 as const },
      { ...candidate, given: 0 },
      { ...candidate, given: 2 },
      { ...candidate, given: 8 },
    ]
    // By hand: the second look decided one of four, the fourth one of two, no other any. After three looks 1 + 6 / 2 = 4 are
    // expected, after two 5, after none 1 + 1 + 3 / 4 of 5 = 5.75; after eight 2. At least 2, 1 and 1; at most 10, 8 and 2.
    expect(looksToCome(candidates, rule)).toEqual({ expected: 12.75, least: 4, most: 20 })
  })
})

describe('the pace', () => {
  it('counts the looks that take a place, and no repeats or looks asked for beside them', async () => {
    const scenario = await reportScenario(['A', 'B', 'C'], 2)
    const { db, campaign, graders, ids } = scenario
    await giveGrade(db, campaign, ids[0], graders[1], 'A', { occasion: 'asked' })
    await giveGrade(db, campaign, ids[1], graders[0], 'B', { occasion: 'repeat' })
    const { progress } = await computedReport(scenario, Date.parse('2026-01-02T12:00:00.000Z'))
    expect(progress.lastDays).toEqual([0, 0, 0, 0, 0, 0, 3])
  })
})
