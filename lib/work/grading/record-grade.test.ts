import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { insertRule } from '@/db/queries/campaigns'
import { Problem } from '@/lib/platform/problems/problem'
import { lendNext } from '@/lib/work/queue/lend-next'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { GradeInput } from './grade-input'
import { recordGrade } from './record-grade'

let scenario: Scenario
let candidate: number

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  candidate = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-1')
})
afterEach(() => vi.useRealTimers())

async function give(grader: number, body: Record<string, unknown>, id = candidate) {
  const permit = await scenario.permit(scenario.graders[grader], 'grade')
  return recordGrade(scenario.db, permit, id, GradeInput.parse(body))
}

const rows = () => scenario.db.selectFrom('grade').selectAll().orderBy('id').execute()
const given = async () =>
  (
    await scenario.db
      .selectFrom('candidate')
      .select('grades_given')
      .where('id', '=', candidate)
      .executeTakeFirstOrThrow()
  ).grades_given
const jobs = () => scenario.db.selectFrom('job').select(['kind', 'unique_key', 'payload']).execute()
const leases = () => scenario.db.selectFrom('lease').selectAll().execute()

async function refusal(call: Promise<unknown>): Promise<{ status: number; type: string }> {
  const error = await call.catch((thrown: unknown) => thrown)
  if (!(error instanceof Problem)) throw new Error(`expected a Problem, got ${String(error)}`)
  return { status: error.status, type: error.type }
}

describe('a grade', () => {
  it('is kept with all that was said, counted, and ends the lease', async () => {
    await lendNext(scenario.db, await scenario.permit(scenario.graders[0], 'grade'), 5)
    const body = { grade: 'B', id: 'uid-00000001', tags: ['arc'], remark: 'thin', view: 'deep', seconds: 12.5 }
    const answer = await give(0, body)
    expect(answer).toMatchObject({ grade: body })
    expect(answer).not.toHaveProperty('replaced')
    expect(await rows()).toMatchObject([
      { uid: 'uid-00000001', grade: 'B', tags: '["arc"]', remark: 'thin', view: 'deep', seconds: 12.5, recipe_id: 1 },
    ])
    expect(await given()).toBe(1)
    expect(await leases()).toEqual([])
  })

  it('changes nothing when the call is repeated with its id, even when the repeat says something else', async () => {
    const first = await give(0, { grade: 'B', id: 'uid-00000001' })
    expect(await give(0, { grade: 'B', id: 'uid-00000001' })).toEqual(first)
    expect((await give(0, { grade: 'N', id: 'uid-00000001' })).grade.grade).toBe('B')
    expect(await rows()).toHaveLength(1)
    expect(await given()).toBe(1)
  })

  it('changes nothing when the call is repeated without an id', async () => {
    const first = await give(0, { grade: 'B', tags: ['ring', 'arc'], remark: 'thin', seconds: 3 })
    expect(await give(0, { grade: 'B', tags: ['arc', 'ring'], remark: ' thin ', seconds: 9 })).toEqual(first)
    expect(await rows()).toHaveLength(1)
  })

  it('is corrected by a new row that names the old one, which stays; the count stays too', async () => {
    await give(0, { grade: 'B', id: 'uid-00000001' })
    const answer = await give(0, { grade: 'N', id: 'uid-00000002', tags: ['spiral'] })
    expect(answer).toMatchObject({ grade: { grade: 'N', tags: ['spiral'] }, replaced: 'uid-00000001' })
    const [old, standing] = await rows()
    expect(old).toMatchObject({ grade: 'B', replaces: null })
    expect(standing).toMatchObject({ grade: 'N', replaces: old.id })
    expect(await given()).toBe(1)
  })

  it('is not brought back by a late repeat of the call that a correction followed', async () => {
    await give(0, { grade: 'B', id: 'uid-00000001' })
    await give(0, { grade: 'N', id: 'uid-00000002' })
    expect((await give(0, { grade: 'B', id: 'uid-00000001' })).grade.grade).toBe('N')
    expect(await rows()).toHaveLength(2)
  })

  it('asks for a consensus run once the least number of grades stands, and again for a correction', async () => {
    await give(0, { grade: 'A' })
    expect(await jobs()).toEqual([])
    await give(1, { grade: 'U' })
    const campaignId = scenario.campaign.id
    const job = { kind: 'consensus', unique_key: `consensus:${campaignId}`, payload: JSON.stringify({ campaignId }) }
    expect(await jobs()).toEqual([job])
    await scenario.db.deleteFrom('job').execute()
    await give(0, { grade: 'C' })
    expect(await jobs()).toEqual([job])
  })
})

describe('without a live lease', () => {
  it('a grade is taken while there is room', async () => {
    await give(0, { grade: 'A' })
    expect(await given()).toBe(1)
  })

  it('a grade is refused once others have filled the candidate, but its owner may still correct theirs', async () => {
    await give(0, { grade: 'A' })
    await give(1, { grade: 'B' })
    expect(await refusal(give(2, { grade: 'C' }))).toEqual({ status: 409, type: 'candidate-full' })
    expect(await given()).toBe(2)
    expect((await give(1, { grade: 'N' })).grade.grade).toBe('N')
  })

  it('a grade does not take the place that another person’s lease keeps', async () => {
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-03-01T20:00:00Z') })
    await lendNext(scenario.db, await scenario.permit(scenario.graders[0], 'grade'), 1)
    vi.setSystemTime(new Date('2026-03-01T21:00:00Z'))
    await lendNext(scenario.db, await scenario.permit(scenario.graders[1], 'grade'), 1)
    await lendNext(scenario.db, await scenario.permit(scenario.graders[2], 'grade'), 1)
    expect(await refusal(give(0, { grade: 'A' }))).toEqual({ status: 409, type: 'candidate-full' })
    await give(1, { grade: 'B' })
    await give(2, { grade: 'B' })
    expect(await given()).toBe(2)
  })

  it('a lapsed lease of another person keeps no place', async () => {
    vi.useFakeTimers({ toFake: ['Date'], now: new Date('2026-03-01T20:00:00Z') })
    await lendNext(scenario.db, await scenario.permit(scenario.graders[0], 'grade'), 1)
    await lendNext(scenario.db, await scenario.permit(scenario.graders[1], 'grade'), 1)
    vi.setSystemTime(new Date('2026-03-01T21:00:00Z'))
    await give(2, { grade: 'C' })
    expect(await given()).toBe(1)
  })
})

describe('a grade is refused', () => {
  it('to a viewer, to a stranger and to the signed out', async () => {
    expect(await refusal(scenario.permit(scenario.reader, 'grade'))).toEqual({ status: 403, type: 'forbidden' })
    expect(await refusal(scenario.permit(scenario.stranger, 'grade'))).toEqual({ status: 404, type: 'not-found' })
  })

  it('for a candidate of another campaign and for one that does not exist, alike', async () => {
    const foreign = await addImagedCandidate(scenario.db, scenario.otherCampaign, 'SWS-9')
    expect(await refusal(give(0, { grade: 'A' }, foreign))).toEqual({ status: 404, type: 'not-found' })
    expect(await refusal(give(0, { grade: 'A' }, 999))).toEqual({ status: 404, type: 'not-found' })
    expect(await rows()).toEqual([])
  })

  it('for a candidate without pictures', async () => {
    await scenario.db.updateTable('candidate').set({ imaged_at: null }).execute()
    expect(await refusal(give(0, { grade: 'A' }))).toEqual({ status: 409, type: 'not-imaged' })
  })

  it('under an id that names a grade of somebody else or of another candidate', async () => {
    const second = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await give(0, { grade: 'A', id: 'uid-00000001' })
    const taken = { status: 409, type: 'grade-id-taken' }
    expect(await refusal(give(1, { grade: 'A', id: 'uid-00000001' }))).toEqual(taken)
    expect(await refusal(give(0, { grade: 'A', id: 'uid-00000001' }, second))).toEqual(taken)
    expect(await rows()).toHaveLength(1)
  })

  it('when a new version of the rule wants no more than stand, lease or not', async () => {
    await lendNext(scenario.db, await scenario.permit(scenario.graders[1], 'grade'), 1)
    await give(0, { grade: 'A' })
    const { campaign, lead } = scenario
    await insertRule(scenario.db, {
      campaignId: campaign.id,
      version: 2,
      method: 'mean',
      gradesWanted: 1,
      leastGrades: 1,
      parameters: { confirmMean: 2, setAsideMean: 0.5, splitSpread: 1 },
      createdBy: lead.id,
      now: '2026-02-01T00:00:00.000Z',
    })
    expect(await refusal(give(1, { grade: 'A' }))).toEqual({ status: 409, type: 'candidate-full' })
  })
})

describe('under a live lease, when a rule lowers the wanted number', () => {
  it('a grade is taken where the lease has the last place, although others hold the candidate too', async () => {
    const { db, campaign, lead, graders } = scenario
    for (const grader of graders.slice(0, 2)) await lendNext(db, await scenario.permit(grader, 'grade'), 1)
    const rule = { gradesWanted: 1, leastGrades: 1, parameters: { confirmMean: 2, setAsideMean: 1, splitSpread: 1 } }
    await insertRule(db, {
      campaignId: campaign.id,
      version: 2,
      method: 'mean',
      ...rule,
      createdBy: lead.id,
      now: '2026-03-01',
    })
    expect((await give(0, { grade: 'A' })).grade.grade).toBe('A')
    expect(await refusal(give(1, { grade: 'B' }))).toEqual({ status: 409, type: 'candidate-full' })
    expect(await refusal(give(2, { grade: 'B' }))).toEqual({ status: 409, type: 'candidate-full' })
    expect(await given()).toBe(1)
  })
})
