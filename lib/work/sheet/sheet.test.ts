import { sql } from 'kysely'
import { beforeEach, describe, expect, it } from 'vitest'
import { listToPass } from '@/db/queries/sheet'
import { isoTime } from '@/lib/platform/clock'
import { runConsensus } from '@/lib/work/consensus/run-consensus'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { lendNext } from '@/lib/work/queue/lend-next'
import { makeSheetScenario, type SheetScenario } from './_sheet-scenario'
import { changeSheet, sheetSettings } from './change-sheet'
import { lendSheet } from './lend-sheet'
import { recordMarks } from './record-marks'
import { passersProgress, sheetCompleteness, sheetProgress } from './sheet-progress'

let scenario: SheetScenario

beforeEach(async () => {
  scenario = await makeSheetScenario(5)
})

const lead = () => scenario.permit(scenario.lead, 'lead')
const grader = (n: number) => scenario.permit(scenario.graders[n], 'grade')
const served = async (n: number) =>
  (await lendNext(scenario.db, await grader(n), 60)).candidates.map(({ id }) => scenario.ids.indexOf(id))
const turn = async (usesSheet: boolean) =>
  changeSheet(scenario.db, await lead(), { usesSheet, passers: [scenario.graders[0].id] })
const verdictOf = async (place: number) =>
  scenario.db
    .selectFrom('candidate')
    .leftJoin('verdict', 'verdict.id', 'candidate.verdict_id')
    .select(['candidate.state', 'verdict.reason', 'verdict.outcome'])
    .where('candidate.id', '=', scenario.ids[place])
    .executeTakeFirstOrThrow()

describe('the bench of a campaign that uses the sheet', () => {
  it('serves only what was sent on, and counts only that', async () => {
    expect(await served(2)).toEqual([])
    await scenario.mark(scenario.graders[0], [1, 3], 'sent on')
    await scenario.mark(scenario.graders[0], [0, 2], 'dropped')
    expect(await served(2)).toEqual([1, 3])
    expect(await lendNext(scenario.db, await grader(3), 1)).toMatchObject({ left: 2 })
  })

  it.each(['score', 'shuffled'] as const)('serves only that in the order %s too', async (queue_order) => {
    await scenario.db.updateTable('campaign').set({ queue_order }).execute()
    await scenario.mark(scenario.graders[0], [4], 'sent on')
    await scenario.mark(scenario.graders[0], [0], 'dropped')
    expect(await served(2)).toEqual([4])
  })

  it('keeps what was graded before the sheet was turned on, and serves everything once it is off', async () => {
    await turn(false)
    expect((await served(2)).toSorted()).toEqual([0, 1, 2, 3, 4])
    await recordGrade(scenario.db, await grader(2), scenario.ids[3], GradeInput.parse({ grade: 'B' }))
    await turn(true)
    expect(await served(1)).toEqual([3])
    await turn(false)
    expect((await served(1)).toSorted()).toEqual([0, 1, 2, 3, 4])
  })

  it('serves what a lead has asked more looks of, whatever the first pass says', async () => {
    await scenario.mark(scenario.graders[0], [2], 'dropped')
    await scenario.db.updateTable('candidate').set({ looks_asked: 1 }).where('id', '=', scenario.ids[2]).execute()
    expect(await served(3)).toEqual([2])
    expect(await lendNext(scenario.db, await grader(2), 1)).toMatchObject({ left: 1 })
  })

  it('never drops what somebody has graded', async () => {
    await recordGrade(scenario.db, await grader(2), scenario.ids[3], GradeInput.parse({ grade: 'B' }))
    await scenario.mark(scenario.graders[0], [3], 'dropped')
    expect(await scenario.stateOf(3)).toBe('sent on')
  })
})

describe('marks', () => {
  it('send on by anyone, whoever dropped it', async () => {
    const [one, other] = scenario.graders
    await scenario.mark(one, [0, 1], 'dropped')
    await scenario.mark(other, [0], 'sent on')
    await scenario.mark(other, [1], 'dropped')
    expect([await scenario.stateOf(0), await scenario.stateOf(1), await scenario.stateOf(2)]).toEqual([
      'sent on',
      'dropped',
      'waiting',
    ])
    await scenario.mark(other, [0], 'taken back')
    expect(await scenario.stateOf(0)).toBe('dropped')
    await scenario.mark(one, [0], 'taken back')
    expect(await scenario.stateOf(0)).toBe('waiting')
  })

  it('change nothing when they come again, in the same request too', async () => {
    const mark = { id: 'mark-0001', candidate: scenario.ids[0], mark: 'sent on' as const }
    const permit = await grader(0)
    expect(await recordMarks(scenario.db, permit, [mark, mark])).toEqual({
      saved: ['mark-0001', 'mark-0001'],
      refused: [],
    })
    await scenario.mark(scenario.graders[0], [0], 'dropped')
    expect((await recordMarks(scenario.db, permit, [mark])).refused).toEqual([])
    expect(await scenario.stateOf(0)).toBe('dropped')
    expect(await scenario.db.selectFrom('sheet_mark').select('id').execute()).toHaveLength(2)
  })

  it('are refused one by one where they cannot be taken, and the rest is taken', async () => {
    const permit = await grader(0)
    await recordMarks(scenario.db, permit, [{ id: 'mark-0001', candidate: scenario.ids[0], mark: 'dropped' }])
    const answer = await recordMarks(scenario.db, permit, [
      { id: 'mark-0001', candidate: scenario.ids[1], mark: 'dropped' },
      { id: 'mark-0002', candidate: 99_999, mark: 'dropped' },
      { id: 'mark-0003', candidate: scenario.ids[2], mark: 'dropped' },
    ])
    expect(answer.saved).toEqual(['mark-0003'])
    expect(answer.refused.map(({ id }) => id)).toEqual(['mark-0001', 'mark-0002'])
    expect([await scenario.stateOf(1), await scenario.stateOf(2)]).toEqual(['waiting', 'dropped'])
  })

  it('are taken of nobody who was not picked, nor is a page given to them', async () => {
    await expect(scenario.mark(scenario.graders[2], [0], 'dropped')).rejects.toMatchObject({ status: 403 })
    await expect(lendSheet(scenario.db, await grader(2), 5)).rejects.toMatchObject({ status: 403 })
    await expect(scenario.permit(scenario.reader, 'grade')).rejects.toMatchObject({ status: 403 })
    expect(await scenario.stateOf(0)).toBe('waiting')
  })

  it('arrive after the sheet was turned off too, though no page is given any more', async () => {
    await turn(false)
    await scenario.mark(scenario.graders[0], [0], 'sent on')
    expect(await scenario.stateOf(0)).toBe('sent on')
    await expect(lendSheet(scenario.db, await grader(0), 5)).rejects.toMatchObject({ type: 'sheet-off' })
  })
})

describe('a consensus run', () => {
  it('sets aside what was not sent on, says so, and takes it back with the mark', async () => {
    await scenario.mark(scenario.graders[0], [0, 1], 'dropped')
    await scenario.mark(scenario.graders[1], [1], 'dropped')
    const run = await runConsensus(scenario.db, await lead())
    expect(run.summary).toMatchObject({ setAside: 2, open: 3 })
    expect(await verdictOf(0)).toMatchObject({
      state: 'set aside',
      reason: 'First pass: not sent on by G02. Nobody has graded it.',
    })
    expect((await verdictOf(1)).reason).toBe('First pass: not sent on by G02 and G03. Nobody has graded it.')
    expect((await verdictOf(2)).outcome).toBeNull()
    expect((await runConsensus(scenario.db, await lead())).unchanged).toBe(true)
    await scenario.mark(scenario.lead, [0], 'sent on')
    await runConsensus(scenario.db, await lead())
    expect(await verdictOf(0)).toMatchObject({ state: 'open', outcome: 'open' })
    expect(await served(2)).toEqual([0])
  })

  it('opens them again when the sheet is turned off, and closes them when it is turned on', async () => {
    await scenario.mark(scenario.graders[0], [0], 'dropped')
    await runConsensus(scenario.db, await lead())
    await turn(false)
    await runConsensus(scenario.db, await lead())
    expect((await verdictOf(0)).state).toBe('open')
    await turn(true)
    await runConsensus(scenario.db, await lead())
    expect((await verdictOf(0)).state).toBe('set aside')
  })

  it('leaves a ruling as it stands', async () => {
    await scenario.mark(scenario.graders[0], [0], 'dropped')
    await recordGrade(scenario.db, await grader(2), scenario.ids[0], GradeInput.parse({ grade: 'A' }))
    await runConsensus(scenario.db, await lead())
    expect((await verdictOf(0)).reason).not.toMatch(/First pass/)
  })
})

describe('the page of a sheet', () => {
  it('is one person’s: two never get the same candidates, and what is given back goes to others', async () => {
    const page = async (n: number) => (await lendSheet(scenario.db, await grader(n), 3)).stamps.map(({ id }) => id)
    const [first, second] = [await page(0), await page(1)]
    expect(first).toHaveLength(3)
    expect(second.filter((id) => first.includes(id))).toEqual([])
    expect(await page(0)).toEqual(first)
  })

  it('mixes calibration stamps in, which it cannot be told apart by, and measures what was sent on of the lenses', async () => {
    scenario = await makeSheetScenario(20, 10)
    const { stamps } = await lendSheet(scenario.db, await grader(0), 30)
    const known = stamps.filter(({ id }) => scenario.ids.indexOf(id) >= 20)
    expect(known.length).toBeGreaterThan(2)
    expect(new Set(stamps.map((stamp) => Object.keys(stamp).join())).size).toBe(1)
    expect(JSON.stringify(stamps)).not.toMatch(/truth|"lens"|score/)
    const place = (stamp: { id: number }) => scenario.ids.indexOf(stamp.id)
    await scenario.mark(scenario.graders[0], known.slice(0, 2).map(place), 'sent on')
    await scenario.mark(scenario.graders[0], known.slice(2, 3).map(place), 'dropped')
    const measured = await sheetCompleteness(scenario.db, await lead())
    expect(measured).toMatchObject({ lenses: 3, sentOn: 2 })
    // Newcombe (1998), method 3, for 2 of 3.
    expect(measured.interval?.low).toBeCloseTo(0.2077, 4)
    expect(await sheetProgress(scenario.db, await lead())).toEqual({ waiting: 20, sentOn: 0, dropped: 0 })
    const again = (await lendSheet(scenario.db, await grader(0), 30)).stamps.map(({ id }) => id)
    expect(known.slice(0, 3).some(({ id }) => again.includes(id))).toBe(false)
  })
})

describe('what who makes the pass is told', () => {
  it('leaves the number of calibration stamps nothing to be subtracted from', async () => {
    scenario = await makeSheetScenario(20, 10)
    const permit = await grader(0)
    expect(await passersProgress(scenario.db, permit)).toEqual({ toCome: 30, passedPercent: 0 })
    await scenario.mark(scenario.graders[0], [0, 1, 2], 'dropped')
    expect(await passersProgress(scenario.db, permit)).toEqual({ toCome: 27, passedPercent: 10 })
  })

  it('falls alike with each mark and rises alike when it is taken back, whether of a candidate or of a stamp', async () => {
    scenario = await makeSheetScenario(100, 60)
    await scenario.db.updateTable('campaign').set({ calibration_share: 0.1 }).execute()
    const permit = await grader(0)
    const { stamps } = await lendSheet(scenario.db, permit, 60)
    const places = stamps.map(({ id }) => scenario.ids.indexOf(id))
    expect(places.filter((place) => place >= 100).length).toBeGreaterThan(0)
    const before = await passersProgress(scenario.db, permit)
    for (const place of places.slice(0, 30)) {
      await scenario.mark(scenario.graders[0], [place], 'sent on')
      expect((await passersProgress(scenario.db, permit)).toCome, `stamp ${place}`).toBe(before.toCome - 1)
      await scenario.mark(scenario.graders[0], [place], 'taken back')
      expect(await passersProgress(scenario.db, permit)).toEqual(before)
    }
    for (const [n, place] of places.slice(0, 30).entries()) {
      await scenario.mark(scenario.graders[0], [place], 'dropped')
      expect((await passersProgress(scenario.db, permit)).toCome).toBe(before.toCome - 1 - n)
    }
  })

  it('comes from all over the campaign, so that no name stands out', async () => {
    scenario = await makeSheetScenario(200)
    const { stamps } = await lendSheet(scenario.db, await grader(0), 20)
    const places = stamps.map(({ id }) => scenario.ids.indexOf(id))
    expect(places).not.toEqual(places.toSorted((a, b) => a - b))
    expect(Math.max(...places) - Math.min(...places)).toBeGreaterThan(60)
  })
})

it('walks a large campaign by the spread, whose two parts hold all that waits', async () => {
  scenario = await makeSheetScenario(40)
  await sql`update candidate set spread = random() & 4294967295`.execute(scenario.db)
  const passer = { campaignId: scenario.campaign.id, personId: scenario.graders[0].id, now: isoTime() }
  const from = (spreadFrom: number) => listToPass(scenario.db, passer, { order: { spreadFrom }, limit: 100 })
  const [ahead, all] = [await from(2 ** 31), await from(0)]
  expect(ahead.length).toBeGreaterThan(10)
  expect(all.slice(-ahead.length)).toEqual(ahead)
  expect(all.map(({ id }) => id).toSorted((a, b) => a - b)).toEqual(scenario.ids)
})

describe('calibration stamps between sheet and bench', () => {
  const benchOf = async (n: number) => (await lendNext(scenario.db, await grader(n), 30)).candidates.map(({ id }) => id)
  const isStamp = (id: number) => scenario.ids.indexOf(id) >= 20

  beforeEach(async () => {
    scenario = await makeSheetScenario(20, 10)
  })

  it('never bring to the bench of who makes the pass what they dropped or have not met', async () => {
    const all = [...scenario.ids.keys()]
    await scenario.mark(scenario.graders[0], all, 'dropped')
    await scenario.mark(scenario.graders[0], [0, 1, 2, 3, 4, 5, 6, 7, 20, 21], 'sent on')
    const own = await benchOf(0)
    expect(own.filter((id) => !isStamp(id)).length).toBe(8)
    expect(own.filter(isStamp).every((id) => [20, 21].includes(scenario.ids.indexOf(id)))).toBe(true)
    // Somebody who made no pass meets any of them.
    const seen = await benchOf(3)
    expect(seen.filter(isStamp).length).toBeGreaterThan(2)
  })

  it('never bring to a sheet what lay on the bench, was graded there, or was told in practice', async () => {
    const permit = await grader(1)
    const grade = GradeInput.parse({ grade: 'A' })
    for (const place of [20, 21, 22]) await recordGrade(scenario.db, permit, scenario.ids[place], grade)
    for (const place of [23, 24, 25]) {
      await scenario.db
        .insertInto('practice_answer')
        .values({
          uid: `practice-${place}`,
          campaign_id: scenario.campaign.id,
          candidate_id: scenario.ids[place],
          person_id: scenario.graders[1].id,
          grade: 'A',
          seconds: null,
          given_at: isoTime(),
        })
        .execute()
    }
    const met = (await lendSheet(scenario.db, permit, 30)).stamps.map(({ id }) => scenario.ids.indexOf(id))
    expect(met.filter((place) => place >= 20 && place <= 25)).toEqual([])
    // Told the truth, nobody measures the pass by it.
    await scenario.mark(scenario.graders[1], [23, 24], 'sent on')
    expect(await sheetCompleteness(scenario.db, await lead())).toMatchObject({ lenses: 0 })
  })
})

describe('the settings of the first pass', () => {
  it('name who makes it, and refuse people who are no graders', async () => {
    expect((await sheetSettings(scenario.db, await lead())).graders.map(({ passes }) => passes)).toEqual([
      true,
      true,
      false,
      false,
    ])
    const change = { usesSheet: false, passers: [scenario.reader.id] }
    await expect(changeSheet(scenario.db, await lead(), change)).rejects.toMatchObject({ status: 422 })
    expect((await sheetSettings(scenario.db, await lead())).usesSheet).toBe(true)
  })
})
