import { createHash } from 'node:crypto'
import { afterEach, expect, it } from 'vitest'
import { listReleaseEntries } from '@/db/queries/releases'
import { addGraded, makeReleaseScenario, publishAndMake, readText, type ReleaseScenario } from './_release-scenario'
import { RELEASE_FILES } from './release-files'

let scenario: ReleaseScenario
afterEach(() => scenario.end())

async function threeJudged() {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  await addGraded(scenario, 'one', 'AAAB', {
    raDeg: 359.9999,
    decDeg: -0.00001,
    remark: 'a "ring", clearly\nblue',
    tags: ['ring'],
  })
  await addGraded(scenario, 'two', 'NNNU')
  await addGraded(scenario, 'three', 'BBA ', { raDeg: 10, decDeg: 20 })
}

it('has every file that it names, and the checksums say so', async () => {
  await threeJudged()
  const { release, files } = await publishAndMake(scenario)
  expect(release).toMatchObject({ number: 1, made: 1, access: 'private', entries: 2, candidates: 3 })
  const names = files.map(({ name }) => name)
  expect(names).toEqual(
    [...RELEASE_FILES.map(({ name }) => name), 'SHA256SUMS', 'stamps.zip', 'RELEASE.zip'].toSorted(),
  )
  const sums = (await readText(scenario, files, 'SHA256SUMS')).trim().split('\n')
  expect(sums).toHaveLength(RELEASE_FILES.length)
  for (const line of sums) {
    const [sha256, name] = line.split('  ')
    const text = await readText(scenario, files, name)
    expect(createHash('sha256').update(text).digest('hex')).toBe(sha256)
  }
})

it('says of each entry what the catalogue said when it was frozen', async () => {
  await threeJudged()
  const { release } = await publishAndMake(scenario)
  const [one, three] = await listReleaseEntries(scenario.db, release.id, { after: 0, limit: 9 })
  expect(one).toMatchObject({
    row_number: 1,
    designation: 'SWS J235959.97-000000.0',
    entry_key: 'SWS-J235959.97-000000.0',
    class: 'A',
    mean: 11 / 4,
    votes_a: 3,
    votes_b: 1,
    decided_by: 'verdict',
    tags: 'ring (4)',
    n_measured: 0,
  })
  expect(one.remarks!.split('\n')[0]).toBe('G02: a "ring", clearly')
  expect(three).toMatchObject({ row_number: 2, name: 'three', entry_key: 'SWS-J004000.00+200000.0', class: 'B' })
})
