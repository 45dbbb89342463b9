import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { delivered } from '@/tests/_support/delivered'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { recordMarks } from '@/lib/work/sheet/record-marks'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(async () => {
  // Whatever became a stamp or ceased to be one: what is counted is what is there.
  const { kept, counted } = await countersAndRecount(intake.db)
  expect(kept).toEqual(counted)
  intake.remove()
})

const { candidate, deliverCandidates } = delivered(() => intake)
const idOf = async (name: string) => (await candidate(name))?.id ?? 0
const truths = async () => {
  const rows = await intake.db
    .selectFrom('candidate')
    .select(['name', 'truth', 'explanation'])
    .orderBy('name')
    .execute()
  return rows.map(({ name, truth, explanation }) => [name, truth, explanation])
}
const manifest = async (text: string) => {
  await intake.deliver('known.csv', text)
  await intake.read()
}
const grade = async (name: string, letter = 'A') =>
  recordGrade(
    intake.db,
    await intake.permit(intake.graders[0], 'grade'),
    await idOf(name),
    GradeInput.parse({ grade: letter }),
  )

describe('a manifest with a truth column', () => {
  it('makes calibration stamps of what it names, in whichever order they come', async () => {
    await deliverCandidates(2)
    await intake.read()
    expect(await truths()).toEqual([
      ['SWS1', null, null],
      ['SWS2', null, null],
    ])
    await manifest('name,truth,explanation\nSWS1,lens,A full ring.\nSWS3,0,\n')
    await deliverCandidates(3)
    await intake.read()
    expect(await truths()).toEqual([
      ['SWS1', 'lens', 'A full ring.'],
      ['SWS2', null, null],
      ['SWS3', 'not a lens', null],
    ])
  })

  it('finds its candidates by file too', async () => {
    await deliverCandidates(1)
    await manifest('file,truth\nSWS1_g.fits,1\n')
    expect(await truths()).toEqual([['SWS1', 'lens', null]])
  })

  it('leaves as it is what has been graded as a candidate, and says so', async () => {
    await deliverCandidates(1)
    await intake.read()
    await grade('SWS1')
    await manifest('name,truth\nSWS1,1\n')
    expect(await truths()).toEqual([['SWS1', null, null]])
    expect(await intake.reasonOf('known.csv')).toBe(
      '1 line taken. Line 2: SWS1 has been graded as an ordinary candidate, so it stays one and does not become a calibration stamp. Deliver it again under another name to use it as one.',
    )
  })

  it('leaves as it is what the first pass has looked at', async () => {
    await deliverCandidates(1)
    await intake.read()
    const mark = { id: 'mark-of-first-pass', candidate: await idOf('SWS1'), mark: 'dropped' as const }
    await recordMarks(intake.db, await intake.permit(intake.lead, 'grade'), [mark])
    await manifest('name,truth\nSWS1,1\n')
    expect(await truths()).toEqual([['SWS1', null, null]])
    expect(await intake.reasonOf('known.csv')).toContain('has been looked at')
  })

  it('leaves as it is what a lead has ruled on', async () => {
    await deliverCandidates(1)
    await intake.read()
    const ruling = { candidate_id: await idOf('SWS1'), person_id: intake.lead.id, outcome: 'open' as const }
    await intake.db
      .insertInto('ruling')
      .values({ ...ruling, grade: null, reason: 'One more.', created_at: intake.campaign.created_at })
      .execute()
    await manifest('name,truth\nSWS1,1\n')
    expect(await truths()).toEqual([['SWS1', null, null]])
    expect(await intake.reasonOf('known.csv')).toContain('has been decided on as an ordinary candidate')
  })

  it('is never that of a stamp that was made here, which gives its name up', async () => {
    await deliverCandidates(2)
    await intake.read()
    const id = await idOf('SWS1')
    const made = () =>
      intake.db.selectFrom('candidate').select(['truth', 'explanation']).where('id', '=', id).executeTakeFirst()
    await intake.db
      .updateTable('candidate')
      .set({ truth: 'lens', painted_over: await idOf('SWS2'), explanation: 'Painted.' })
      .where('name', '=', 'SWS1')
      .execute()
    await manifest('name,truth,explanation\nSWS1,0,Other.\n')
    expect(await made()).toEqual({ truth: 'lens', explanation: 'Painted.' })
    expect((await truths()).map(([name]) => name)).not.toContain('SWS1')
    await manifest('name,score\nSWS1,0.3\n')
    expect(await made()).toEqual({ truth: 'lens', explanation: 'Painted.' })
  })
})

describe('a corrected manifest', () => {
  beforeEach(async () => {
    await deliverCandidates(1)
    await manifest('name,truth,explanation\nSWS1,1,A ring.\n')
    expect(await truths()).toEqual([['SWS1', 'lens', 'A ring.']])
  })

  it('that no longer says a truth makes an ordinary candidate of a stamp that nobody has looked at', async () => {
    await manifest('name,score\nSWS1,0.4\n')
    expect(await truths()).toEqual([['SWS1', null, null]])
    expect(await intake.reasonOf('known.csv')).toBe('1 line taken.')
  })

  it('that no longer says it leaves a stamp that has been graded what it is, and says so', async () => {
    await grade('SWS1', 'N')
    await manifest('name,score\nSWS1,0.4\n')
    expect(await truths()).toEqual([['SWS1', 'lens', 'A ring.']])
    expect(await intake.reasonOf('known.csv')).toBe(
      '1 line taken. SWS1 is a calibration stamp and has been graded as one, so it stays one although no manifest calls it that any more.',
    )
  })

  it('that no longer says it leaves a stamp on which somebody has practised what it is', async () => {
    await intake.db
      .insertInto('practice_answer')
      .values({
        uid: 'practice-1',
        campaign_id: intake.campaign.id,
        candidate_id: await idOf('SWS1'),
        person_id: intake.graders[0].id,
        grade: 'A',
        seconds: null,
        given_at: intake.campaign.created_at,
      })
      .execute()
    await manifest('name,score\nSWS1,0.4\n')
    expect(await truths()).toEqual([['SWS1', 'lens', 'A ring.']])
  })

  it('corrects the truth of a graded stamp, of which reliabilities are learned anew', async () => {
    await grade('SWS1', 'N')
    await intake.db.deleteFrom('job').execute()
    await manifest('name,truth\nSWS1,nonlens\n')
    expect(await truths()).toEqual([['SWS1', 'not a lens', null]])
    const jobs = await intake.db.selectFrom('job').select('kind').execute()
    expect(jobs.map(({ kind }) => kind)).toContain('consensus')
  })

  it('that is refused leaves the stamp what it is', async () => {
    await manifest('x,y\n1,2\n')
    expect(await truths()).toEqual([['SWS1', 'lens', 'A ring.']])
  })
})
