import { beforeEach, describe, expect, it } from 'vitest'
import { countLooks } from '@/db/queries/mixing'
import { Problem } from '@/lib/platform/problems/problem'
import { lendNext } from '@/lib/work/queue/lend-next'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { GradeInput } from './grade-input'
import { noteShown } from './may-reveal'
import { ownAnswer } from './own-answer'
import { recordGrade } from './record-grade'

let scenario: Scenario
let candidate: number

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  candidate = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-1')
})

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

async function refusal(call: Promise<unknown>): Promise<{ status: number; type: string }> {
  const error = await call.catch((thrown: unknown) => thrown)
  if (!(error instanceof Problem)) throw new Error(`expected a Problem, got ${String(error)}`)
  return { status: error.status, type: error.type }
}

describe('a grade that is to be kept late', () => {
  const late = { grade: 'C', id: 'uid-late-001', remark: 'thin', late: true }
  beforeEach(async () => {
    await give(0, { grade: 'A' })
    await give(1, { grade: 'B' })
  })

  it('is kept beside a full candidate, said to be late, and takes no place, moves no estimate and asks for no run', async () => {
    await scenario.db.deleteFrom('job').execute()
    expect(await give(2, late)).toMatchObject({ late: true, grade: { id: 'uid-late-001', grade: 'C', remark: 'thin' } })
    expect((await rows())[2]).toMatchObject({ occasion: 'late', grade: 'C', replaces: null })
    expect(await given()).toBe(2)
    expect(await jobs()).toEqual([])
  })

  it('is an ordinary first grade where there is room, and a correction where one stands', async () => {
    const other = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    expect(await give(2, { ...late, id: 'uid-late-002' }, other)).not.toHaveProperty('late')
    expect(await give(1, { ...late, id: 'uid-late-003' })).not.toHaveProperty('late')
    expect((await rows()).map(({ occasion }) => occasion)).toEqual(['first', 'first', 'first', 'first'])
  })

  it('arrives once however often it is sent, with its id or without', async () => {
    const first = await give(2, late)
    expect(await give(2, late)).toEqual(first)
    expect(await give(2, { grade: 'C', remark: 'thin' })).toEqual(first)
    expect(await rows()).toHaveLength(3)
  })

  it('is corrected by another late one, until the person has been shown what the others said', async () => {
    await give(2, late)
    expect(await give(2, { grade: 'N' })).toMatchObject({ late: true, replaced: 'uid-late-001', grade: { grade: 'N' } })
    const permit = await scenario.permit(scenario.graders[2], 'grade')
    await noteShown(scenario.db, permit, [candidate])
    expect(await refusal(give(2, { grade: 'A' }))).toEqual({ status: 409, type: 'judgement-seen' })
    expect(await rows()).toHaveLength(4)
  })

  it('answers in the bench of a person who looks back', async () => {
    await give(2, late)
    const permit = await scenario.permit(scenario.graders[2], 'grade')
    expect(await ownAnswer(scenario.db, permit, candidate)).toMatchObject({ answer: { grade: 'C' }, open: true })
  })

  it('is never lent again, and moves the place in the queue on', async () => {
    await give(2, late)
    const permit = await scenario.permit(scenario.graders[2], 'grade')
    await scenario.db.updateTable('candidate').set({ looks_asked: 3 }).execute()
    expect((await lendNext(scenario.db, permit, 5)).candidates).toEqual([])
    expect(await countLooks(scenario.db, scenario.campaign.id, permit.viewer.id)).toBe(1)
  })

  it('keeps every counter right', async () => {
    await give(2, late)
    await give(2, { grade: 'N' })
    const { kept, counted } = await countersAndRecount(scenario.db)
    expect(kept).toEqual(counted)
  })
})
