import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import type { GradeLetter } from '@/db/schema/grading'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { candidateEvidence } from '@/lib/work/rulings/candidate-evidence'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { revealedTo } from '@/lib/work/grading/may-reveal'
import { changeRole } from '@/lib/work/people/change-membership'
import type { Viewer } from '@/lib/work/people/viewer'
import { lendNext } from '@/lib/work/queue/lend-next'
import { queueProgress } from '@/lib/work/queue/queue-progress'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { AskInput, LONGEST_NOTE } from './ask-input'
import { askLooks } from './ask-looks'
import { answeredPeople, askableAt, askedOfMe, asksOf, openAsks } from './list-asks'
import { withdrawAsk } from './withdraw-ask'

let scenario: Scenario
let full: number
let curlew: Viewer
let dunlin: Viewer
let plover: Viewer
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 2, leastGrades: 2 })
  ;[curlew, dunlin, plover] = scenario.graders
  full = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-1')
  await grade(curlew, 'B')
  await grade(dunlin, 'N')
})
afterEach(() => scenario.db.destroy())

const lead = () => scenario.permit(scenario.lead, 'lead')
async function grade(person: Viewer, letter: GradeLetter, more: object = {}, id = full) {
  const permit = await scenario.permit(person, 'grade')
  return recordGrade(scenario.db, permit, id, GradeInput.parse({ grade: letter, ...more }))
}
async function ask(people: Viewer[], note: string | null = null, id = full) {
  return askLooks(scenario.db, await lead(), id, AskInput.parse({ people: people.map((one) => one.id), note }))
}
async function bench(person: Viewer, count = 5) {
  const { candidates, left } = await lendNext(scenario.db, await scenario.permit(person, 'grade'), count)
  return { candidates: candidates.map(({ name, asked }) => ({ name, asked: asked?.by ?? null })), left }
}
const rows = () =>
  scenario.db.selectFrom('grade').select(['person_id', 'grade', 'occasion', 'replaces']).orderBy('id').execute()
const counted = async () =>
  (await candidateEvidence(scenario.db, await scenario.permit(scenario.lead, 'read'), full)).judgement?.grades.map(
    ({ by, grade, occasion, informed }) => `${by} ${grade} ${occasion}${informed ? ' informed' : ''}`,
  )
const asks = () => scenario.db.selectFrom('asked_look').selectAll().execute()
const nothingAsked = async () => {
  expect(await asks()).toEqual([])
  expect(await scenario.db.selectFrom('mail').select('id').execute()).toEqual([])
}

describe('asking for a look', () => {
  it('puts the candidate first on the bench of who is asked, by name, also where they have graded it, and on nobody else’s', async () => {
    const other = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await ask([curlew, plover], 'Mind the arc.')
    for (const person of [curlew, plover]) {
      expect(await bench(person)).toEqual({
        candidates: [
          { name: 'SWS-1', asked: 'avocet' },
          { name: candidateNumber(other), asked: null },
        ],
        left: 2,
      })
    }
    expect((await bench(dunlin)).candidates).toEqual([])
    expect(await askedOfMe(scenario.db, await scenario.permit(curlew, 'read'))).toBe(1)
    expect(await openAsks(scenario.db, await lead())).toMatchObject([
      { of: 'curlew', by: 'avocet', candidate: 'SWS-1', note: 'Mind the arc.' },
      { of: 'plover', candidate: 'SWS-1' },
    ])
  })

  it('writes to each of them who asks and where, and not a word of what anybody graded', async () => {
    await ask([curlew, plover], 'Mind the arc.')
    const mails = await scenario.db.selectFrom('mail').select(['recipient', 'subject', 'body']).execute()
    expect(mails.map(({ recipient }) => recipient)).toEqual(['curlew@saltmarsh.test', 'plover@saltmarsh.test'])
    expect(mails[0].subject).toBe('avocet asks for your look at SWS-1')
    expect(mails[0].body).toContain(`/campaigns/${scenario.campaign.slug}/bench`)
    expect(mails[0].body).toContain('“Mind the arc.”')
    expect(mails[0].body).toContain('You have graded it before.')
    expect(mails[1].body).toContain('You have not graded it yet.')
    for (const { body } of mails) expect(body).not.toMatch(/dunlin|\b[BN]\b|split|mean/)
    expect(await scenario.db.selectFrom('job').select('kind').where('kind', '=', 'send-mail').execute()).toHaveLength(2)
  })

  it('takes a lead’s own bench too, without a mail to oneself', async () => {
    await ask([scenario.lead])
    expect((await bench(scenario.lead)).candidates).toEqual([{ name: 'SWS-1', asked: 'avocet' }])
    expect(await scenario.db.selectFrom('mail').select('id').execute()).toEqual([])
  })

  it('gives back the place that a lease of theirs kept', async () => {
    const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await bench(plover)
    expect(await scenario.db.selectFrom('lease').select('candidate_id').execute()).toEqual([{ candidate_id: open }])
    await ask([plover], null, open)
    expect(await scenario.db.selectFrom('lease').select('candidate_id').execute()).toEqual([])
    expect((await bench(plover)).candidates).toEqual([{ name: 'SWS-2', asked: 'avocet' }])
  })

  it('shows what speaks against asking: an earlier grade, an open ask, what they have been shown', async () => {
    await candidateEvidence(scenario.db, await scenario.permit(dunlin, 'read'), full)
    await scenario.db
      .insertInto('left_out')
      .values({
        campaign_id: scenario.campaign.id,
        person_id: plover.id,
        left_out: 1,
        reason: 'Says B to all.',
        decided_by: scenario.lead.id,
        created_at: '2026-01-03',
      })
      .execute()
    await ask([curlew])
    expect(await askableAt(scenario.db, await lead(), full)).toMatchObject([
      { name: 'avocet', role: 'lead', grade: null, shown: false, asked: false },
      { name: 'curlew', grade: 'B', asked: true, shown: false },
      { name: 'dunlin', grade: 'N', asked: false, shown: true },
      { name: 'plover', grade: null, shown: false, leftOut: true },
      { name: 'whimbrel', leftOut: false },
    ])
  })
})

describe('the answer', () => {
  it('is kept beside the earlier grade, counts in its place, and takes no place of the wanted number', async () => {
    const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await grade(curlew, 'C', {}, open)
    await ask([curlew, plover])
    await scenario.db.deleteFrom('job').execute()
    await grade(curlew, 'B', { asked: true })
    await grade(plover, 'A')
    expect((await rows()).slice(-2)).toMatchObject([
      { person_id: curlew.id, grade: 'B', occasion: 'asked', replaces: null },
      { person_id: plover.id, grade: 'A', occasion: 'asked', replaces: null },
    ])
    expect(await counted()).toEqual(['plover A asked', 'curlew B asked', 'dunlin N first'])
    const { grades_given } = await scenario.db
      .selectFrom('candidate')
      .select('grades_given')
      .where('id', '=', full)
      .executeTakeFirstOrThrow()
    expect(grades_given).toBe(2)
    expect((await bench(curlew)).candidates).toEqual([])
    expect(await scenario.db.selectFrom('job').select('kind').execute()).toEqual([{ kind: 'consensus' }])
    expect((await asksOf(scenario.db, await lead(), full)).map(({ state }) => state)).toEqual(['answered', 'answered'])
  })

  it('of somebody who had not graded takes a place where one is left: the rule and the bench count the same looks', async () => {
    const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await grade(curlew, 'B', {}, open)
    await ask([plover], null, open)
    await grade(plover, 'N', { asked: true }, open)
    const row = await scenario.db.selectFrom('candidate').select('grades_given').where('id', '=', open).execute()
    expect(row).toEqual([{ grades_given: 2 }])
    expect((await bench(dunlin)).candidates).toEqual([])
    await expect(grade(dunlin, 'A', {}, open)).rejects.toMatchObject({ type: 'candidate-full' })
    expect(await queueProgress(scenario.db, await scenario.permit(plover, 'grade'))).toMatchObject({ given: 1 })
    const reads = await scenario.permit(scenario.lead, 'read')
    const { judgement } = await candidateEvidence(scenario.db, reads, open)
    expect(judgement?.grades.map(({ by, occasion }) => `${by} ${occasion}`)).toEqual(['curlew first', 'plover asked'])
    await ask([plover], null, open)
    await grade(plover, 'B', { asked: true }, open)
    expect(await queueProgress(scenario.db, await scenario.permit(plover, 'grade'))).toMatchObject({ given: 2 })
  })

  it('of somebody who had not graded takes no place that another holds on their bench', async () => {
    const open = await addImagedCandidate(scenario.db, scenario.campaign, 'SWS-2')
    await grade(curlew, 'B', {}, open)
    expect((await bench(dunlin)).candidates).toMatchObject([{ name: candidateNumber(open) }])
    await ask([plover], null, open)
    await grade(plover, 'N', { asked: true }, open)
    expect((await grade(dunlin, 'A', {}, open)).grade.grade).toBe('A')
    const row = await scenario.db.selectFrom('candidate').select('grades_given').where('id', '=', open).execute()
    expect(row).toEqual([{ grades_given: 2 }])
  })

  it('can be delivered twice and corrected; the correction replaces the asked answer', async () => {
    await ask([curlew])
    const id = 'uid-00000009'
    await grade(curlew, 'A', { asked: true, id })
    expect(await grade(curlew, 'A', { asked: true, id })).not.toHaveProperty('stillAsked')
    expect(await rows()).toHaveLength(3)
    await grade(curlew, 'C', { asked: true })
    expect(await counted()).toEqual(['curlew C asked', 'dunlin N first'])
  })

  it('says which ask it answers: named again it corrects that answer, and a newer ask stays open', async () => {
    await ask([curlew])
    const [{ id: first }] = await asks()
    await grade(curlew, 'A', { asked: first })
    await ask([curlew])
    await grade(curlew, 'C', { asked: first })
    expect(await counted()).toEqual(['curlew C asked', 'dunlin N first'])
    expect(await askedOfMe(scenario.db, await scenario.permit(curlew, 'read'))).toBe(1)
    await expect(grade(dunlin, 'A', { asked: first })).rejects.toMatchObject({ type: 'look-withdrawn' })
  })

  it('is not a correction of an earlier grade that arrives late: that one corrects, and the ask stays open', async () => {
    await ask([curlew])
    const [{ id }] = await asks()
    expect(await grade(curlew, 'C')).toMatchObject({ replaced: expect.anything(), stillAsked: id })
    expect(await counted()).toEqual(['curlew C first', 'dunlin N first'])
    expect(await askedOfMe(scenario.db, await scenario.permit(curlew, 'read'))).toBe(1)
  })

  it('of a lead, who sees the others’ grades by role, is marked so', async () => {
    await ask([scenario.lead, plover])
    await grade(scenario.lead, 'A')
    await grade(plover, 'A')
    expect(await counted()).toContain('avocet A asked informed')
    expect(await counted()).toContain('plover A asked')
    expect(await answeredPeople(scenario.db, full)).toEqual(
      new Map([
        [scenario.lead.id, { informed: true }],
        [plover.id, { informed: false }],
      ]),
    )
  })

  it('is given without the others’ grades in sight: they are withheld again until then', async () => {
    const reads = await scenario.permit(curlew, 'read')
    expect(await revealedTo(scenario.db, reads, [full])).toEqual(new Set([full]))
    await ask([curlew])
    expect(await revealedTo(scenario.db, reads, [full])).toEqual(new Set())
    expect((await candidateEvidence(scenario.db, reads, full)).judgement).toBeNull()
    await grade(curlew, 'B', { asked: true })
    expect(await revealedTo(scenario.db, reads, [full])).toEqual(new Set([full]))
  })
})

describe('an ask ends', () => {
  it('when a lead withdraws it: it leaves the bench, and a late answer is refused while an earlier grade stands', async () => {
    await ask([curlew])
    const [{ id }] = await asks()
    expect(await withdrawAsk(scenario.db, await lead(), id)).toEqual({ name: 'curlew' })
    expect((await bench(curlew)).candidates).toEqual([])
    await expect(grade(curlew, 'A', { asked: true })).rejects.toMatchObject({ status: 409, type: 'look-withdrawn' })
    expect(await counted()).toEqual(['curlew B first', 'dunlin N first'])
    await ask([curlew])
    expect((await bench(curlew)).candidates).toHaveLength(1)
  })

  it('when it is withdrawn, also a second one: its answer is no correction of the one before', async () => {
    await ask([plover])
    await grade(plover, 'C')
    await ask([plover])
    const [, second] = await asks()
    await withdrawAsk(scenario.db, await lead(), second.id)
    for (const asked of [second.id, true]) {
      await expect(grade(plover, 'A', { asked })).rejects.toMatchObject({ status: 409, type: 'look-withdrawn' })
    }
    expect(await counted()).toEqual(['curlew B first', 'plover C asked', 'dunlin N first'])
    await ask([plover])
    await expect(grade(plover, 'A', { asked: second.id })).rejects.toMatchObject({ type: 'look-withdrawn' })
    expect(await askedOfMe(scenario.db, await scenario.permit(plover, 'read'))).toBe(1)
  })

  it('when the candidate is confirmed or set aside by ruling', async () => {
    await ask([curlew, plover])
    const setAside = { outcome: 'set aside', grade: null, reason: 'A tail.' } as const
    expect(await ruleOnCandidate(scenario.db, await lead(), full, setAside)).toMatchObject({ asksWithdrawn: 2 })
    expect((await bench(curlew)).candidates).toEqual([])
    expect((await asks()).every(({ withdrawn_at }) => withdrawn_at !== null)).toBe(true)
  })

  it('when the person may not grade any more', async () => {
    await ask([plover])
    await changeRole(scenario.db, await lead(), { personId: plover.id, role: 'viewer' })
    expect(await openAsks(scenario.db, await lead())).toEqual([])
  })
})

describe('asking is refused', () => {
  it('of a grader who has seen the others’ grades, and then of nobody', async () => {
    await candidateEvidence(scenario.db, await scenario.permit(curlew, 'read'), full)
    await expect(ask([plover, curlew])).rejects.toMatchObject({
      type: 'judgement-seen',
      message: /would not be independent/,
    })
    await nothingAsked()
  })

  it('of a viewer, of a stranger, twice of the same person, and of nobody', async () => {
    await expect(ask([scenario.reader])).rejects.toMatchObject({ status: 422 })
    await expect(ask([scenario.stranger])).rejects.toMatchObject({ status: 422 })
    await nothingAsked()
    expect(() => AskInput.parse({ people: [] })).toThrow(/Choose whom you ask/)
    expect(() => AskInput.parse({ people: [1], note: 'x'.repeat(LONGEST_NOTE + 1) })).toThrow(/at most 500/)
    await ask([curlew])
    await expect(ask([curlew])).rejects.toMatchObject({ status: 409, type: 'asked-already' })
    expect(await asks()).toHaveLength(1)
  })

  it('for a calibration stamp, for a candidate without pictures, and under a ruling', async () => {
    const { db, campaign } = scenario
    const known = await addImagedCandidate(db, campaign, 'known')
    await db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', known).execute()
    await expect(ask([plover], null, known)).rejects.toMatchObject({ type: 'calibration' })
    const dark = await addImagedCandidate(db, campaign, 'dark')
    await db.updateTable('candidate').set({ imaged_at: null }).where('id', '=', dark).execute()
    await expect(ask([plover], null, dark)).rejects.toMatchObject({ type: 'not-imaged' })
    await ruleOnCandidate(db, await lead(), full, { outcome: 'confirmed', grade: 'B', reason: 'Real.' })
    await expect(ask([plover])).rejects.toMatchObject({ type: 'ruled' })
    await nothingAsked()
  })

  it('for a candidate of another campaign, and from whoever is no lead', async () => {
    const there = await addImagedCandidate(scenario.db, scenario.otherCampaign, 'there')
    await expect(ask([plover], null, there)).rejects.toMatchObject({ status: 404 })
    await expect(scenario.permit(plover, 'lead')).rejects.toMatchObject({ status: 403 })
  })
})

describe('withdrawing is refused', () => {
  it('of a look that is given, of one withdrawn already, and of one of another campaign', async () => {
    await ask([curlew, plover])
    const [first, second] = await asks()
    await grade(curlew, 'B', { asked: true })
    await expect(withdrawAsk(scenario.db, await lead(), first.id)).rejects.toMatchObject({ type: 'look-given' })
    await withdrawAsk(scenario.db, await lead(), second.id)
    await expect(withdrawAsk(scenario.db, await lead(), second.id)).rejects.toMatchObject({ type: 'look-withdrawn' })
    await expect(withdrawAsk(scenario.db, await lead(), 999)).rejects.toMatchObject({ status: 404 })
  })
})
