import { afterEach, beforeEach, expect, it } from 'vitest'
import type { Viewer } from '@/lib/work/people/viewer'
import { addPicturedCandidate } from '@/tests/_support/pictured-candidate'
import { makeScenario, type Scenario } from '@/tests/_support/scenario'
import { measure, onCircle } from './_measurements'
import { listMeasurements } from './list-measurements'
import { standingMeasurements } from './standing-measurements'
import { withdrawMeasurement } from './withdraw-measurement'

let scenario: Scenario
let confirmed: number
beforeEach(async () => {
  scenario = await makeScenario({ gradesWanted: 4, leastGrades: 3 })
  confirmed = await addPicturedCandidate(scenario, 'SWS-1', { grades: 'AAA' })
})
afterEach(() => scenario.db.destroy())

const standing = async (viewer: Viewer, id = confirmed, upTo?: number) =>
  standingMeasurements(scenario.db, await scenario.permit(viewer, 'read'), [id], { upTo })
const listed = async (viewer: Viewer, id = confirmed) =>
  listMeasurements(scenario.db, await scenario.permit(viewer, 'read'), id)
const radius = (arcsec: number) => ({ points: onCircle(arcsec, 8) })

it('are combined over people, one each, with their scatter and pseudonyms', async () => {
  const [curlew, dunlin] = scenario.graders
  await measure(scenario, curlew, confirmed, radius(2))
  await measure(scenario, curlew, confirmed, radius(1.4))
  await measure(scenario, dunlin, confirmed, radius(1.6))
  const found = (await standing(scenario.reader)).get(confirmed)
  // Equal errors, so the mean; two values 0.2 apart scatter by 0.2 / sqrt 2; S^2 = chi^2 / (n - 1) of the Particle Data Group.
  expect(found).toMatchObject({ count: 2, by: ['G02', 'G03'], kinds: ['circle', 'circle'], measurementIds: [2, 3] })
  expect(found!.einsteinRadiusArcsec).toBeCloseTo(1.5, 9)
  expect(found!.scatterArcsec).toBeCloseTo(0.2 / Math.SQRT2, 9)
  expect(found!.errorArcsec).toBeCloseTo(0.1, 6)
})

it('are told as they stood when a release was frozen, whatever was replaced or withdrawn since', async () => {
  const [curlew] = scenario.graders
  const { id } = await measure(scenario, curlew, confirmed, radius(2))
  await withdrawMeasurement(scenario.db, await scenario.permit(curlew, 'grade'), confirmed, id)
  expect((await standing(scenario.lead)).size).toBe(0)
  expect((await standing(scenario.lead, confirmed, id)).get(confirmed)?.einsteinRadiusArcsec).toBeCloseTo(2, 9)
})

it('of a person with a model set by hand and a circle count the circle, which has an error', async () => {
  const lens = { centre: { east: 0, north: 0 }, einsteinRadiusArcsec: 5, axisRatio: 1, positionAngleDeg: 0 }
  const shape = { kind: 'model', lens, source: { east: 0, north: 0.1 }, sourceRadiusArcsec: 0.2, fit: null }
  await measure(scenario, scenario.graders[0], confirmed, { points: [], shape })
  expect((await standing(scenario.lead)).get(confirmed)).toMatchObject({ einsteinRadiusArcsec: 5, errorArcsec: null })
  await measure(scenario, scenario.graders[0], confirmed, radius(1.5))
  expect((await standing(scenario.lead)).get(confirmed)?.einsteinRadiusArcsec).toBeCloseTo(1.5, 9)
})

it('of calibration stamps are in no answer, and such a stamp looks to graders like an open candidate', async () => {
  const [curlew, dunlin, , whimbrel] = scenario.graders
  const stamp = await addPicturedCandidate(scenario, 'SWS-2', { grades: 'A' })
  const open = await addPicturedCandidate(scenario, 'SWS-3', { grades: 'A' })
  await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', stamp).execute()
  for (const id of [stamp, open]) {
    await measure(scenario, curlew, id)
    await measure(scenario, scenario.lead, id, radius(3))
    for (const person of [curlew, dunlin, whimbrel]) expect((await standing(person, id)).size).toBe(0)
  }
  expect((await standing(scenario.lead, stamp)).size).toBe(0)
  expect((await standing(scenario.lead, open)).get(open)?.count).toBe(2)
  const seen = await Promise.all([stamp, open].map((id) => listed(curlew, id)))
  for (const one of seen) expect(one).toMatchObject({ alone: true, standing: [{ own: true }], combined: { count: 1 } })
  expect(await listed(scenario.reader, stamp)).toBeNull()
  expect((await listed(scenario.lead, stamp))?.standing).toHaveLength(2)
})

it('are withheld from a grader who has not judged the candidate; others see pseudonyms and leads see names', async () => {
  await measure(scenario, scenario.graders[0], confirmed)
  expect(await listed(scenario.graders[3])).toBeNull()
  expect((await standing(scenario.graders[3])).size).toBe(0)
  expect((await listed(scenario.graders[1]))?.standing).toMatchObject([{ by: 'G02', own: false }])
  expect((await listed(scenario.lead))?.standing).toMatchObject([{ by: 'curlew', own: false }])
  expect((await listed(scenario.reader))?.mayMeasure).toBe(false)
})

it('earlier ones are shown to whom they belong and to leads', async () => {
  await measure(scenario, scenario.graders[0], confirmed, radius(2))
  await measure(scenario, scenario.graders[0], confirmed, radius(1.5))
  expect((await listed(scenario.graders[0]))?.earlier).toMatchObject([{ endedBy: { withdrawn: false } }])
  expect((await listed(scenario.lead))?.earlier).toHaveLength(1)
  expect((await listed(scenario.graders[1]))?.earlier).toEqual([])
})

it('are noted as shown to a grader, whose own grade stands from then on', async () => {
  await measure(scenario, scenario.lead, confirmed)
  await standing(scenario.graders[0])
  expect(await scenario.db.selectFrom('judgement_shown').select('person_id').execute()).toEqual([
    { person_id: scenario.graders[0].id },
  ])
})

it('are closed to strangers', async () => {
  await expect(standing(scenario.stranger)).rejects.toMatchObject({ status: 404 })
})
