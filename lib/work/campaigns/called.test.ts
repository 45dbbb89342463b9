import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { answerPractice, PracticeInput, practiceState } from '@/lib/work/calibration/practice'
import { candidateTable } from '@/lib/work/catalogue/candidate-table'
import { catalogueTable } from '@/lib/work/catalogue/catalogue-table'
import { listCandidates } from '@/lib/work/catalogue/list-candidates'
import type { TableInput } from '@/lib/work/catalogue/table-input'
import { mentionsOfMe } from '@/lib/work/discussion/list-mentions'
import { postMessage } from '@/lib/work/discussion/post-message'
import { askLooks } from '@/lib/work/discussion/ask-looks'
import { withdrawAsk } from '@/lib/work/discussion/withdraw-ask'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import type { Viewer } from '@/lib/work/people/viewer'
import { lendNext } from '@/lib/work/queue/lend-next'
import { candidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { candidateName } from '@/lib/work/rulings/candidate-name'
import { neighboursOf } from '@/lib/work/rulings/find-neighbours'
import { changeSheet } from '@/lib/work/sheet/change-sheet'
import { lendSheet } from '@/lib/work/sheet/lend-sheet'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { candidateNumber } from './candidate-number'

let scenario: Scenario
/** Of a survey whose numbers have no gap: nine candidates, then three calibration stamps behind the last. */
let ids: number[]
let stamps: number[]
let grader: Viewer
let other: Viewer

beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 3, leastGrades: 2 })
  ;[grader, other] = scenario.graders
  const { db, campaign } = scenario
  ids = []
  for (let n = 1; n <= 12; n++) ids.push(await addImagedCandidate(db, campaign, `SURVEY000${n}`))
  stamps = ids.slice(9)
  await db
    .updateTable('candidate')
    .set({ truth: 'lens', painted_over: ids[0], explanation: 'Painted.' })
    .where('id', 'in', stamps)
    .execute()
  await db.updateTable('campaign').set({ calibration_share: 0.5 }).where('id', '=', campaign.id).execute()
})
afterEach(() => scenario.db.destroy())

const grade = async (viewer: Viewer, id: number, letter = 'N') =>
  recordGrade(scenario.db, await scenario.permit(viewer, 'grade'), id, GradeInput.parse({ grade: letter }))

const SORTED: TableInput['order'][] = ['name', 'id', 'ra', 'grades', 'mean', 'state', 'known']
const table = async (viewer: Viewer, input: Partial<TableInput>) =>
  candidateTable(scenario.db, await scenario.permit(viewer, 'read'), {
    filter: {},
    order: 'name',
    descending: false,
    page: 0,
    pageSize: 50,
    ...input,
  })
const byName = (...parts: string[]) => ({
  filter: { columns: [{ column: 'name' as const, condition: { kind: 'contains' as const, parts } }] },
})

/** Everything that the person is told of candidates before they grade, as one text. */
async function everythingToldTo(viewer: Viewer): Promise<string> {
  const { db } = scenario
  const grading = await scenario.permit(viewer, 'grade')
  const told: unknown[] = [
    await lendNext(db, grading, 20),
    (await practiceState(db, grading)).next,
    await listCandidates(db, grading, { limit: 100 }),
    await catalogueTable(db, grading, { filter: {}, order: 'name', descending: false, page: 0, pageSize: 50 }),
    await mentionsOfMe(db, grading),
  ]
  await changeSheet(db, await scenario.permit(scenario.lead, 'lead'), { usesSheet: true, passers: [viewer.id] })
  const { stamps: onSheet } = await lendSheet(db, await scenario.permit(viewer, 'grade'), 60)
  expect(onSheet.length).toBeGreaterThan(6)
  told.push(onSheet)
  for (const order of SORTED)
    told.push(await table(viewer, { order }), await table(viewer, { order, descending: true }))
  for (const part of ['SURVEY', 'SURVEY00012', 'No.']) told.push(await table(viewer, byName(part)))
  for (const id of ids) {
    told.push(await candidateEvidence(db, grading, id), await candidateName(db, grading, id))
    told.push(await neighboursOf(db, grading, id))
  }
  const mails = await db.selectFrom('mail').selectAll().where('recipient', '=', viewer.email!).execute()
  return JSON.stringify([told, mails])
}

describe('before a grader has judged them', () => {
  it('candidates and calibration stamps are called by their number in everything that they are told', async () => {
    await grade(other, ids[1])
    await grade(other, stamps[1])
    for (const id of [ids[1], stamps[1]]) {
      await postMessage(scenario.db, await scenario.permit(other, 'grade'), id, { body: '@G02 look' })
    }
    const told = await everythingToldTo(grader)
    expect(told).not.toContain('SURVEY')
    for (const id of ids) expect(told).toContain(`"${candidateNumber(id)}"`)
    expect(told).toContain(`You are mentioned: ${candidateNumber(stamps[1])}`)
  })

  it('are told to a lead by name, and to viewers all but the stamps', async () => {
    for (const id of ids)
      expect(await candidateName(scenario.db, await scenario.permit(scenario.lead, 'read'), id)).toMatch(/^SURVEY/)
    const names = async (viewer: Viewer) => (await table(viewer, {})).rows.map(({ name }) => name)
    expect(await names(scenario.lead)).toEqual(Array.from({ length: 12 }, (_, k) => `SURVEY000${k + 1}`))
    expect(await names(scenario.reader)).toEqual(Array.from({ length: 9 }, (_, k) => `SURVEY000${k + 1}`))
    const { candidates } = await lendNext(scenario.db, await scenario.permit(scenario.lead, 'grade'), 3)
    for (const { name } of candidates) expect(name).toMatch(/^SURVEY/)
  })

  it('have no place by name: what they have judged comes first by name, the rest by number whichever way', async () => {
    // Numbers run against the names.
    for (const [k, id] of ids.entries()) {
      await scenario.db
        .updateTable('candidate')
        .set({ name: `X${99 - k}` })
        .where('id', '=', id)
        .execute()
    }
    await grade(grader, ids[2])
    await grade(grader, stamps[0])
    const rest = ids.filter((id) => id !== ids[2] && id !== stamps[0])
    const order = async (descending: boolean) => (await table(grader, { descending })).rows.map(({ id }) => id)
    expect(await order(false)).toEqual([stamps[0], ids[2], ...rest])
    expect(await order(true)).toEqual([ids[2], stamps[0], ...rest.toReversed()])
    const paged = []
    for (let page = 0; page < 4; page++) {
      paged.push(...(await table(grader, { page, pageSize: 3 })).rows.map(({ id }) => id))
    }
    expect(paged).toEqual([stamps[0], ids[2], ...rest])
  })

  it('are not found by their name, but by their number', async () => {
    await grade(grader, ids[2])
    const found = async (...parts: string[]) => (await table(grader, byName(...parts))).rows.map(({ id }) => id)
    expect(await found('SURVEY')).toEqual([ids[2]])
    expect(await found('SURVEY00011')).toEqual([])
    expect(await found(candidateNumber(stamps[1]))).toContain(stamps[1])
    expect(await found('No.')).toHaveLength(11)
  })

  it('are next to each other by number on their pages', async () => {
    await scenario.db.updateTable('candidate').set({ name: 'AAA' }).where('id', '=', ids[5]).execute()
    const permit = await scenario.permit(grader, 'read')
    const { previous, next } = await neighboursOf(scenario.db, permit, ids[4])
    expect([previous, next]).toEqual([
      { id: ids[3], name: candidateNumber(ids[3]) },
      { id: ids[5], name: candidateNumber(ids[5]) },
    ])
    const forLead = await neighboursOf(scenario.db, await scenario.permit(scenario.lead, 'read'), ids[4])
    expect(forLead.next?.id).toBe(ids[6])
  })
})

describe('the name is told', () => {
  it.each(['A', 'N'])(
    'with the answer to their %s and from then on everywhere, of a stamp like of a candidate',
    async (letter) => {
      for (const [id, name] of [
        [ids[3], 'SURVEY0004'],
        [stamps[0], 'SURVEY00010'],
      ] as const) {
        expect((await grade(grader, id, letter)).called).toBe(name)
        const permit = await scenario.permit(grader, 'read')
        expect(await candidateName(scenario.db, permit, id)).toBe(name)
        expect((await candidateEvidence(scenario.db, permit, id)).name).toBe(name)
        const { candidates } = await listCandidates(scenario.db, permit, { limit: 100 })
        expect(candidates.find((one) => one.id === id)?.name).toBe(name)
      }
    },
  )

  it("not by 'cannot judge', and not any more once the grade is corrected to that", async () => {
    expect((await grade(grader, ids[3], 'U')).called).toBe(candidateNumber(ids[3]))
    expect((await grade(grader, ids[3], 'B')).called).toBe('SURVEY0004')
    expect((await grade(grader, ids[3], 'U')).called).toBe(candidateNumber(ids[3]))
  })

  it('while a lead asks for a look by name, and no longer when that is withdrawn', async () => {
    const { db } = scenario
    const lead = await scenario.permit(scenario.lead, 'lead')
    const name = async () => candidateName(db, await scenario.permit(grader, 'read'), ids[3])
    await askLooks(db, lead, ids[3], { people: [grader.id], note: null })
    expect(await name()).toBe('SURVEY0004')
    const [{ name: onBench }] = (await lendNext(db, await scenario.permit(grader, 'grade'), 3)).candidates
    expect(onBench).toBe('SURVEY0004')
    expect(await candidateName(db, await scenario.permit(other, 'read'), ids[3])).toBe(candidateNumber(ids[3]))
    const { id } = await db.selectFrom('asked_look').select('id').executeTakeFirstOrThrow()
    await withdrawAsk(db, lead, id)
    expect(await name()).toBe(candidateNumber(ids[3]))
  })

  it('by practice after the answer, and not by one that is refused', async () => {
    const permit = await scenario.permit(grader, 'grade')
    const { next } = await practiceState(scenario.db, permit)
    if (!next) return expect.unreachable('no stamp to practise on')
    expect(next.name).toBe(candidateNumber(next.id))
    const answer = PracticeInput.parse({ grade: 'A', id: 'answer-of-test' })
    const unshown = stamps.find((id) => id !== next.id)!
    const refused = await answerPractice(scenario.db, permit, unshown, answer).catch((error: Error) => error)
    expect(String((refused as Error).message)).not.toContain('SURVEY')
    expect((await answerPractice(scenario.db, permit, next.id, answer)).name).toBe(
      `SURVEY000${ids.indexOf(next.id) + 1}`,
    )
  })

  it('in no refusal of a grade, a message or a candidate that is not there', async () => {
    const permit = await scenario.permit(grader, 'grade')
    await scenario.db.updateTable('candidate').set({ imaged_at: null }).where('id', '=', ids[8]).execute()
    await scenario.db.updateTable('candidate').set({ grades_given: 3 }).where('id', '=', ids[7]).execute()
    const refusals = [
      await grade(grader, ids[8]).catch((error: Error) => error.message),
      await grade(grader, ids[7]).catch((error: Error) => error.message),
      await postMessage(scenario.db, permit, stamps[2], { body: 'x' }).catch((error: Error) => error.message),
    ]
    for (const sentence of refusals) {
      expect(sentence).toEqual(expect.any(String))
      expect(sentence).not.toContain('SURVEY')
    }
  })
})
