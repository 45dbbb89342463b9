import { mkdir, writeFile } from 'node:fs/promises'
import path from 'node:path'
import Papa from 'papaparse'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { listReleaseEntries, listReleaseFiles } from '@/db/queries/releases'
import { fromJson } from '@/db/schema/values'
import { exportCatalogue } from '@/lib/work/catalogue/export-catalogue'
import { addList, match } from '@/lib/work/matching/_matching-scenario'
import { mergeCandidates } from '@/lib/work/matching/merge-candidates'
import { measure, onCircle } from '@/lib/work/measuring/_measurements'
import { addPicturedCandidate } from '@/tests/_support/pictured-candidate'
import { makeReleaseScenario, publishAndMake, readText, RELEASE, type ReleaseScenario } from './_release-scenario'
import { makeRelease } from './make-release'
import { publishRelease } from './publish-release'
import { readEntryPage, readReleaseTable } from './read-release-page'
import { readTableQuery } from './table-query'

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
    { list: 'Marsh lenses', name: 'Old ring', separationArcsec: expect.closeTo(0.5, 6) as number, keptOutOfNew: true },
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

const rowsOf = (csv: string) => Papa.parse<Record<string, string>>(csv, { header: true, skipEmptyLines: true }).data

it('tells each standing measurement under a pseudonym, with method, redshifts, mass and the cosmology of both', async () => {
  const [curlew, dunlin] = scenario.graders
  await measure(scenario, curlew, lens, { points: onCircle(9, 8) })
  await measure(scenario, curlew, lens, {
    points: onCircle(1.5, 8),
    redshifts: {
      lens: { basis: 'typed', value: 0.4, error: null },
      source: { basis: 'assumed', low: 1.5, high: 2.1 },
    },
  })
  await measure(scenario, dunlin, lens, {
    points: [],
    shape: {
      kind: 'model',
      lens: { centre: { east: 0, north: 0 }, einsteinRadiusArcsec: 1.6, axisRatio: 0.7, positionAngleDeg: 45 },
      source: { east: 0.1, north: 0.05 },
      sourceRadiusArcsec: 0.2,
      fit: null,
    },
  })
  const { files } = await publishAndMake(scenario)
  const [circle, model, ...others] = rowsOf(await readText(scenario, files, 'measurements.csv'))
  expect(others).toEqual([])
  expect(circle).toMatchObject({
    entry: 'SWS-J004000.00+200000.0',
    name: 'lens',
    measured_by: 'G02',
    used: 'yes',
    kind: 'circle',
    method: 'circle fitted to points along the arc',
    n_points: '8',
    lens_redshift: '0.4',
    lens_redshift_basis: 'typed',
    source_redshift: '1.8',
    source_redshift_basis: 'assumed',
    source_redshift_low: '1.5',
    hubble_constant: '70',
    omega_matter: '0.3',
  })
  expect(Number(circle.einstein_radius)).toBeCloseTo(1.5, 9)
  // 276.2 km/s and 4.49e11 solar masses by astropy 7 for 1.5 arcsec, redshifts 0.4 and 1.8, H0 = 70, Om = 0.3.
  expect(Number(circle.velocity_dispersion)).toBeCloseTo(276.2, 0)
  expect(Number(circle.mass) / 1e11).toBeCloseTo(4.49, 1)
  expect(Number(circle.mass_low)).toBeLessThan(Number(circle.mass))
  expect(model).toMatchObject({
    measured_by: 'G03',
    method: 'model set by hand',
    axis_ratio: '0.7',
    position_angle: '45',
    source_east: '0.1',
    einstein_radius_error: '',
    mass: '',
    cosmology: '',
  })
  expect(model.images.split('; ').length).toBeGreaterThanOrEqual(2)
  expect(await readText(scenario, files, 'other-columns.csv')).toMatch(/^measurements.csv,mass,solMass,/m)
})

it('tells no measurement that came after the freeze or was withdrawn, and none of what is no entry', async () => {
  const other = await addPicturedCandidate(scenario, 'no lens', { grades: 'NNNN', position: { raDeg: 11, decDeg: 20 } })
  await measure(scenario, scenario.graders[0], other, { points: onCircle(1, 8) })
  const { id } = await publishRelease(scenario.db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  await measure(scenario, scenario.graders[1], lens, { points: onCircle(3, 8) })
  await makeRelease(scenario.tools, id, async () => {})
  const files = await listReleaseFiles(scenario.db, id)
  expect(rowsOf(await readText(scenario, files, 'measurements.csv'))).toEqual([])
})

it.each([
  [true, 'no', 0],
  [false, 'yes', 1],
])(
  'says whether an entry is new, by whether the list keeps what it knows out of new lists: %s',
  async (keeps, isNew, count) => {
    await addList(scenario, [{ name: 'Old ring', raDeg: 10, decDeg: 20 }], { keepsOutOfNew: keeps })
    await match(scenario.db, scenario.campaign.id)
    const { release, files } = await publishAndMake(scenario)
    const [row] = rowsOf(await readText(scenario, files, 'catalogue.csv'))
    expect(row).toMatchObject({ known_as: 'Old ring (Marsh lenses, 0.00 arcsec)', new: isNew })
    expect(await readText(scenario, files, 'catalogue.json')).toContain(`"new":"${isNew}"`)
    const table = (known: string) => readReleaseTable(scenario.db, release, readTableQuery({ known }))
    expect([(await table('no')).count, (await table('yes')).count]).toEqual([count, 1])
  },
)

it('names the candidate that one was merged into', async () => {
  const twin = await addPicturedCandidate(scenario, 'twin', { grades: 'AABB', position: { raDeg: 10, decDeg: 20 } })
  const permit = await scenario.permit(scenario.lead, 'lead')
  await mergeCandidates(scenario.db, permit, { kept: lens, merged: [twin], reason: 'The same arc.' })
  const { files } = await publishAndMake(scenario)
  const rows = rowsOf(await readText(scenario, files, 'candidates.csv'))
  expect(rows.map(({ name, merged_into: into }) => [name, into])).toEqual([
    ['lens', ''],
    ['twin', 'lens'],
  ])
})

it('says in README what a class is, when a candidate is open or split, and the cosmology once', async () => {
  const { files } = await publishAndMake(scenario)
  const readme = await readText(scenario, files, 'README.txt')
  expect(readme).toContain('A sure, B probable, C possible, N not a lens.')
  expect(readme).toMatch(/split where the mean lies in between or .*; open while grades are lacking/)
  expect(readme.match(/\bflat\b/g)).toHaveLength(1)
  expect(readme).toMatch(/RELEASE.zip holds it and so is not in it/)
})

it('shows how its pictures lie on the sky, as long as they are those that the campaign has', async () => {
  const { release } = await publishAndMake(scenario)
  const [entry] = await entriesOf(release.id)
  const { geometries } = await readEntryPage(scenario.db, release, entry.entry_key)
  expect(Object.keys(geometries).toSorted()).toEqual(Object.keys(fromJson(entry.stamps)).toSorted())
  expect(geometries.colour).toMatchObject({ width: 80, height: 80, geometry: { pixelScaleArcsec: 0.2 } })
  const other = 'f'.repeat(64)
  await scenario.db.updateTable('stamp').set({ sha256: other }).where('view', '=', 'colour').execute()
  const after = (await readEntryPage(scenario.db, release, entry.entry_key)).geometries
  expect(after.colour).toBeUndefined()
})

it('tells in README of a retraction nothing of a catalogue that is not there', async () => {
  await publishAndMake(scenario)
  const { files } = await publishAndMake(scenario, { kind: 'retraction', corrects: 1, statement: 'Wrong field.' })
  const readme = await readText(scenario, files, 'README.txt')
  expect(readme).toContain('A retraction holds no catalogue: its tables are empty.')
  expect(readme).not.toMatch(/0 entries|Verdicts:|Cosmology|recipe|RECOMPUTED/)
  expect(readme).not.toContain('\n\n\n')
})
