import { mkdir, writeFile } from 'node:fs/promises'
import path from 'node:path'
import Papa from 'papaparse'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { listReleaseEntries } from '@/db/queries/releases'
import { fromJson } from '@/db/schema/values'
import { exportCatalogue } from '@/lib/work/catalogue/export-catalogue'
import { addList, match } from '@/lib/work/matching/_matching-scenario'
import { measure, onCircle } from '@/lib/work/measuring/_measurements'
import { addPicturedCandidate } from '@/tests/_support/pictured-candidate'
import { makeReleaseScenario, publishAndMake, RELEASE, type ReleaseScenario } from './_release-scenario'
import { makeRelease } from './make-release'
import { publishRelease } from './publish-release'

let scenario: ReleaseScenario
let lens: number
beforeEach(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  const position = { raDeg: 10, decDeg: 20 }
  lens = await addPicturedCandidate(scenario, 'lens', { grades: 'AAAB', position })
  // Its stamps are names without bytes: what stands for them is put where a release keeps them.
  for (const { sha256 } of await scenario.db.selectFrom('stamp').select('sha256').execute()) {
    const blob = scenario.tools.blobs.pathOf(sha256)
    await mkdir(path.dirname(blob), { recursive: true })
    await writeFile(blob, 'picture')
  }
})
afterEach(() => scenario.end())

const entriesOf = (id: number) => listReleaseEntries(scenario.db, id, { after: 0, limit: 9 })

it('has the Einstein radius as it was measured when it was frozen, not as it is measured later', async () => {
  const [curlew, dunlin] = scenario.graders
  await measure(scenario, curlew, lens, { points: onCircle(1.4, 8) })
  const { id } = await publishRelease(scenario.db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  await measure(scenario, dunlin, lens, { points: onCircle(3, 8) })
  await makeRelease(scenario.tools, id, async () => {})
  const [entry] = await entriesOf(id)
  expect(entry.einstein_radius_arcsec).toBeCloseTo(1.4, 9)
  expect(entry).toMatchObject({ n_measured: 1 })
  expect(fromJson(entry.measurement!)).toMatchObject({ by: ['G02'] })
})

it('says as what an object is known, with the list and how near', async () => {
  await addList(scenario, [{ name: 'Old ring', raDeg: 10, decDeg: 20 + 0.5 / 3600 }])
  await match(scenario.db, scenario.campaign.id)
  const { release } = await publishAndMake(scenario)
  const [entry] = await entriesOf(release.id)
  expect(fromJson(entry.known_as)).toEqual([
    { list: 'Marsh lenses', name: 'Old ring', separationArcsec: expect.closeTo(0.5, 6) as number },
  ])
})

it('is in the working export too, which has what is measured now', async () => {
  await publishAndMake(scenario)
  await measure(scenario, scenario.graders[0], lens, { points: onCircle(1.4, 8) })
  const { text } = await exportCatalogue(scenario.db, await scenario.permit(scenario.reader, 'read'), 'csv')
  let csv = ''
  for await (const piece of text) csv += piece
  const [row] = Papa.parse<Record<string, string>>(csv, { header: true }).data
  expect(Number(row.einstein_radius)).toBeCloseTo(1.4, 9)
  expect(row.n_measured).toBe('1')
})
