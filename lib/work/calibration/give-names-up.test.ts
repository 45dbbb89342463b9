import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { demoFiles } from '@/fixtures/demo/demo-candidates'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { lookUpFiles } from '@/lib/work/intake/look-up-files'
import { imageCandidates } from '@/lib/work/stamps/image-candidates'
import { makeGalaxies, paintAndImage } from './_galaxies'

let room: Awaited<ReturnType<typeof makeGalaxies>>
let stamp: Awaited<ReturnType<typeof candidate>>
beforeEach(async () => {
  room = await makeGalaxies()
  await paintAndImage(room, { galaxies: [room.galaxies[0]], lenses: 1 })
  stamp = await room.db.selectFrom('candidate').selectAll().where('truth', 'is not', null).executeTakeFirstOrThrow()
})
afterEach(() => room.remove())

const candidate = (id: number) =>
  room.db.selectFrom('candidate').selectAll().where('id', '=', id).executeTakeFirstOrThrow()
const called = (name: string) => room.db.selectFrom('candidate').selectAll().where('name', '=', name).executeTakeFirst()
const planes = (id: number) =>
  room.db.selectFrom('plane').select(['band', 'file_id']).where('candidate_id', '=', id).orderBy('band').execute()
const pictures = (id: number) =>
  room.db.selectFrom('stamp').select(['view', 'sha256']).where('candidate_id', '=', id).orderBy('view').execute()
const filesOf = (name: string) =>
  demoFiles({ name, raDeg: 8, decDeg: 1, score: 0.4, simulated: simulateCandidate('spiral', 77) })

async function deliver(name: string): Promise<void> {
  for (const { name: file, bytes } of filesOf(name)) await room.deliver(file, bytes)
  await room.read()
}

describe('a painted stamp whose name is delivered for a candidate', () => {
  it.each(['graded', 'not graded'])('takes another name and keeps all else, %s', async (how) => {
    const [grader] = room.graders
    if (how === 'graded') {
      const answer = GradeInput.parse({ grade: 'A' })
      await recordGrade(room.db, await room.permit(grader, 'grade'), stamp.id, answer)
    }
    const before = {
      planes: await planes(stamp.id),
      pictures: await pictures(stamp.id),
      row: await candidate(stamp.id),
    }
    await deliver(stamp.name)
    const after = await candidate(stamp.id)
    expect(after.name).not.toBe(stamp.name)
    expect(after.name).toMatch(/^SWS\d{4}$/)
    expect({ ...after, name: stamp.name }).toEqual(before.row)
    expect(await planes(stamp.id)).toEqual(before.planes)
    expect(await pictures(stamp.id)).toEqual(before.pictures)
    const own = await called(stamp.name)
    expect(own).toMatchObject({ truth: null, painted_over: null, grades_given: 0 })
    expect(own?.imaged_at).not.toBeNull()
    const delivered = await room.db
      .selectFrom('file')
      .select(['id', 'fate'])
      .where('name', 'like', `${stamp.name}%`)
      .execute()
    expect(new Set(delivered.map(({ fate }) => fate))).toEqual(new Set(['imaged']))
    expect((await planes(own!.id)).map(({ file_id }) => file_id).sort()).toEqual(delivered.map(({ id }) => id).sort())
    const event = { action: 'calibration.name-given-up', subject: stamp.name }
    const events = await room.db.selectFrom('audit_event').selectAll().where('action', '=', event.action).execute()
    expect(events).toMatchObject([event])
    expect(JSON.parse(events[0].detail)).toEqual({ candidate: stamp.id, from: stamp.name, to: after.name })
  })

  it('does so for a manifest, whose facts go to the candidate alone', async () => {
    await room.deliver('scores.csv', `candidate,score,truth\n${stamp.name},0.31,0\n`)
    await room.read()
    const after = await candidate(stamp.id)
    expect(after.name).not.toBe(stamp.name)
    expect(after).toMatchObject({ truth: 'lens', score: stamp.score, explanation: stamp.explanation })
    expect(await room.reasonOf('scores.csv')).toBe('1 line taken.')
    await deliver(stamp.name)
    expect(await called(stamp.name)).toMatchObject({ truth: 'not a lens', score: 0.31, painted_over: null })
    expect((await candidate(stamp.id)).name).toBe(after.name)
  })

  it('is drawn again under its new name', async () => {
    await deliver(stamp.name)
    const before = await room.db.selectFrom('candidate').select(['id', 'name']).orderBy('id').execute()
    const drawn = await pictures(stamp.id)
    await imageCandidates(room.tools, { campaignId: room.campaign.id, candidateIds: [stamp.id] }, async () => {})
    expect(await room.db.selectFrom('candidate').select(['id', 'name']).orderBy('id').execute()).toEqual(before)
    expect(await pictures(stamp.id)).toEqual(drawn)
  })

  it('is no file here to who looks before they send, and no file of its takes part in a manifest', async () => {
    const look = filesOf(stamp.name).map(({ name }) => ({ name }))
    const lead = await room.permit(room.lead, 'lead')
    // As stamps had their files named once.
    const painted = await planes(stamp.id)
    for (const { band, file_id } of painted) {
      await room.db
        .updateTable('file')
        .set({ name: `${stamp.name}_${band}.fits` })
        .where('id', '=', file_id)
        .execute()
    }
    const { files, told } = await lookUpFiles(room.db, lead, { look })
    expect([files, told]).toEqual([
      [null, null, null],
      [null, null, null],
    ])
    await room.deliver('files.csv', `file,candidate,score\n${stamp.name}_g.fits,SWS0900,0.2\n`)
    await room.read()
    expect(await candidate(stamp.id)).toMatchObject({ score: stamp.score, imaged_at: stamp.imaged_at })
    await deliver(stamp.name)
    expect(await planes(stamp.id)).toEqual(painted)
    expect((await planes((await called(stamp.name))!.id)).map(({ band }) => band)).toEqual(['i', 'r'])
    expect((await planes((await called('SWS0900'))!.id)).map(({ band }) => band)).toEqual(['g'])
  })
})

it('a stamp that a manifest told, and an ordinary candidate, keep their names and take what is delivered for them', async () => {
  const [ordinary] = room.galaxies
  await room.deliver('truth.csv', 'candidate,truth\nSWS0117,1\n')
  await room.read()
  for (const name of ['SWS0117', 'SWS0155']) {
    const { id } = (await called(name))!
    const before = await planes(id)
    await deliver(name)
    expect((await called(name))?.id).toBe(id)
    expect(await planes(id)).not.toEqual(before)
  }
  expect(await candidate(ordinary)).toMatchObject({ name: 'SWS0100' })
  const events = room.db.selectFrom('audit_event').selectAll().where('action', '=', 'calibration.name-given-up')
  expect(await events.execute()).toEqual([])
})
