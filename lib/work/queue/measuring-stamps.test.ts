import { expect, it } from 'vitest'
import { GradeInput } from '@/lib/work/grading/grade-input'
import { recordGrade } from '@/lib/work/grading/record-grade'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'
import { lendNext } from './lend-next'

async function withStamps() {
  const scenario = await makeScenario()
  const { db, campaign } = scenario
  const ids: number[] = []
  for (let n = 0; n < 60; n++) ids.push(await addImagedCandidate(db, campaign, `SWS${n}`))
  const stamps = ids.slice(40)
  await db.updateTable('candidate').set({ truth: 'lens' }).where('id', 'in', stamps).execute()
  await db.updateTable('campaign').set({ calibration_share: 0.3 }).execute()
  return { ...scenario, stamps, galaxies: ids.slice(0, 20) }
}

it('leads, whose pages tell what each stamp is, are lent none, told of none to come, and measured by none', async () => {
  const { db, permit, lead, graders, stamps } = await withStamps()
  const own = await lendNext(db, await permit(lead, 'lead'), 60)
  expect(own.candidates.some(({ id }) => stamps.includes(id))).toBe(false)
  expect(own.left).toBe(40)
  const grade = GradeInput.parse({ grade: 'A' })
  await expect(recordGrade(db, await permit(lead, 'lead'), stamps[0], grade)).rejects.toMatchObject({
    status: 409,
    type: 'judgement-seen',
  })
  const others = await lendNext(db, await permit(graders[0], 'grade'), 60)
  expect(others.candidates.some(({ id }) => stamps.includes(id))).toBe(true)
  await recordGrade(db, await permit(graders[0], 'grade'), stamps[0], grade)
  await db.destroy()
})

it('a stamp over a galaxy that the person has graded comes only where no other is left', async () => {
  const { db, permit, graders, stamps, galaxies } = await withStamps()
  const permitted = await permit(graders[0], 'grade')
  for (const [n, id] of galaxies.entries()) {
    await recordGrade(db, permitted, id, GradeInput.parse({ grade: 'N' }))
    if (n >= 12) continue
    await db.updateTable('candidate').set({ painted_over: id }).where('id', '=', stamps[n]).execute()
  }
  const { candidates } = await lendNext(db, permitted, 20)
  const met = candidates.map(({ id }) => stamps.indexOf(id)).filter((at) => at >= 0)
  expect(met.length).toBeGreaterThan(0)
  expect(met.filter((at) => at < 12)).toEqual([])
  await db.destroy()
})
