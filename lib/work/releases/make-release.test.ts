import { createHash } from 'node:crypto'
import { mkdir, rm, writeFile } from 'node:fs/promises'
import path from 'node:path'
import { afterEach, expect, it, vi } from 'vitest'
import { listReleaseEntries } from '@/db/queries/releases'
import { addGraded, makeReleaseScenario, publishAndMake, readText, type ReleaseScenario } from './_release-scenario'
import { Readable } from 'node:stream'
import { findReleaseById, listReleaseFiles } from '@/db/queries/releases'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { stampPath } from '@/lib/work/stamps/stamp-store'
import { makeRelease } from './make-release'
import { publishRelease } from './publish-release'
import { RELEASE } from './_release-scenario'
import { RELEASE_FILES } from './release-files'
import { zipOf } from './zip-files'

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

it('goes on where a process was killed, after whatever entry or file, and leaves nothing out', async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  for (let index = 0; index < 5; index++) await addGraded(scenario, `lens ${index}`, 'AAAB', { raDeg: index })
  const { id } = await publishRelease(scenario.db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  let kills = 0
  const seen = new Map<string, string>()
  for (let made = false; !made;) {
    await makeRelease(scenario.tools, id, async () => {
      kills += 1
      throw new Error('killed')
    }).catch((error: Error) => expect(error.message).toBe('killed'))
    for (const { name, sha256 } of await listReleaseFiles(scenario.db, id)) {
      expect(seen.get(name) ?? sha256).toBe(sha256)
      seen.set(name, sha256)
    }
    made = (await findReleaseById(scenario.db, id))?.made === 1
  }
  expect(kills).toBe(1 + 1 + RELEASE_FILES.length + 3)
  const entries = await listReleaseEntries(scenario.db, id, { after: 0, limit: 9 })
  expect(entries.map(({ row_number: row }) => row)).toEqual([1, 2, 3, 4, 5])
  expect(seen.size).toBe(RELEASE_FILES.length + 3)
})

it('does nothing to a release that is complete', async () => {
  await threeJudged()
  const { release } = await publishAndMake(scenario)
  await makeRelease(scenario.tools, release.id, async () => {
    throw new Error('worked')
  })
})

it('keeps the pictures of its entries for good, and asks at once for all that are missing, by the recipe that they had', async () => {
  await threeJudged()
  const { db, tools } = scenario
  const { id } = await publishRelease(db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  const without = { ...tools, stampFolder: `${tools.stampFolder}-lost` }
  await expect(makeRelease(without, id, async () => {})).rejects.toThrow('2 pictures were missing and are being made')
  const jobs = await db.selectFrom('job').select('payload').where('kind', '=', 'image-candidates').execute()
  const { id: recipeId } = await db.selectFrom('recipe').select('id').executeTakeFirstOrThrow()
  const confirmed = await db
    .selectFrom('candidate')
    .select('id')
    .where('state', '=', 'confirmed')
    .orderBy('id')
    .execute()
  expect(jobs.map(({ payload }) => JSON.parse(payload as string))).toContainEqual({
    campaignId: scenario.campaign.id,
    candidateIds: confirmed.map((candidate) => candidate.id),
    recipeId,
  })
  expect(await listReleaseEntries(db, id, { after: 0, limit: 1 })).toEqual([])
  const steps: number[] = []
  await makeRelease(tools, id, async (done) => void steps.push(done))
  expect(steps[0]).toBe(1)
  const [entry] = await listReleaseEntries(db, id, { after: 0, limit: 1 })
  expect(new TextDecoder().decode(await tools.blobs.read(entry.thumbnail!))).toBe('PNG of one')
  expect(JSON.parse(entry.stamps)).toEqual({ colour: entry.thumbnail })
})

it('makes no entry with a picture that was drawn anew while the others were copied, and goes on with the new one', async () => {
  await threeJudged()
  const { db, tools } = scenario
  const { id } = await publishRelease(db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  const drawn = new TextEncoder().encode('PNG of one, corrected')
  const sha256 = createHash('sha256').update(drawn).digest('hex')
  const drawAnew = async () => {
    const { id: one } = await db
      .selectFrom('candidate')
      .select('id')
      .where('name', '=', 'one')
      .executeTakeFirstOrThrow()
    await db.updateTable('stamp').set({ sha256 }).where('candidate_id', '=', one).execute()
  }
  await expect(makeRelease(tools, id, drawAnew)).rejects.toThrow('drawn anew meanwhile')
  expect(await listReleaseEntries(db, id, { after: 0, limit: 9 })).toEqual([])
  await mkdir(path.dirname(stampPath(tools.stampFolder, sha256)), { recursive: true })
  await writeFile(stampPath(tools.stampFolder, sha256), drawn)
  await makeRelease(tools, id, async () => {})
  const [entry] = await listReleaseEntries(db, id, { after: 0, limit: 9 })
  expect(entry.thumbnail).toBe(sha256)
  expect((await findReleaseById(db, id))?.made).toBe(1)
})

it('makes a file again, the same, whose bytes were lost before the archive was there', async () => {
  await threeJudged()
  const { db, tools } = scenario
  const { id } = await publishRelease(db, await scenario.permit(scenario.lead, 'lead'), RELEASE)
  const lose = async (done: number, total: number) => {
    if (done === total - 1) throw new Error('killed')
  }
  await expect(makeRelease(tools, id, lose)).rejects.toThrow('killed')
  const before = await listReleaseFiles(db, id)
  expect(before.map(({ name }) => name)).toContain('README.txt')
  expect(before.map(({ name }) => name)).not.toContain('RELEASE.zip')
  for (const { sha256 } of before) await rm(tools.blobs.pathOf(sha256), { force: true })
  await makeRelease(tools, id, async () => {})
  for (const { name, sha256 } of before) expect(await tools.blobs.has(sha256), name).toBe(true)
  expect((await findReleaseById(db, id))?.made).toBe(1)
})

it('names the recipe of its pictures', async () => {
  await threeJudged()
  const { files } = await publishAndMake(scenario)
  const { hash } = await scenario.db.selectFrom('recipe').select('hash').executeTakeFirstOrThrow()
  expect(JSON.parse(await readText(scenario, files, 'rule.json'))).toMatchObject({
    recipeSha256: hash,
    candidates: 3,
    entries: 2,
  })
})

it('is as of the freeze: what is graded, ruled or renamed afterwards is in the next one', async () => {
  await threeJudged()
  const { db, lead, graders } = scenario
  const permit = await scenario.permit(lead, 'lead')
  const { id } = await publishRelease(db, permit, RELEASE)
  await db.updateTable('candidate').set({ name: 'renamed', dec_deg: 80 }).where('name', '=', 'one').execute()
  const two = await db.selectFrom('candidate').select('id').where('name', '=', 'two').executeTakeFirstOrThrow()
  await ruleOnCandidate(db, permit, two.id, { outcome: 'confirmed', grade: 'A', reason: 'Seen in the new image.' })
  const last = await db.selectFrom('grade').selectAll().where('person_id', '=', graders[0].id).executeTakeFirstOrThrow()
  await db
    .insertInto('grade')
    .values({ ...last, id: undefined, uid: 'later', grade: 'C', replaces: last.id })
    .execute()
  await makeRelease(scenario.tools, id, async () => {})
  const first = await listReleaseFiles(db, id)
  const csv = await readText(scenario, first, 'candidates.csv')
  expect(csv).toContain('one,SWS J235959.97-000000.0,359.9999,-0.00001,confirmed,confirmed,4,0,2.75,')
  expect(csv).toMatch(/^two,,.*,set aside,set aside,3,1,0,/m)
  expect(await readText(scenario, first, 'grades.csv')).not.toContain('corrected')
  const { files } = await publishAndMake(scenario)
  expect(await readText(scenario, files, 'grades.csv')).toMatch(/^renamed,G02,first,A,no,corrected,/m)
  expect(await readText(scenario, files, 'changes.csv')).toBe(
    [
      'name,designation,change,before,after',
      'renamed,SWS J235959.97-000000.0,class,A,B',
      'renamed,SWS J235959.97-000000.0,name,one,renamed',
      'renamed,SWS J235959.97-000000.0,position,359.9999 -0.00001,359.9999 80',
      'renamed,SWS J235959.97-000000.0,grades,"A 3, B 1, C 0, N 0, 0 cannot judge","A 2, B 1, C 1, N 0, 0 cannot judge"',
      'renamed,SWS J235959.97-000000.0,mean,2.75,2.25',
      'renamed,SWS J235959.97-000000.0,spread,0.4330127018922193,0.82915619758885',
      'two,SWS J100024.00+021200.0,entered,set aside,confirmed',
      'two,SWS J100024.00+021200.0,ruling,,confirmed A: Seen in the new image.',
      '',
    ].join('\r\n'),
  )
  expect(await readText(scenario, files, 'README.txt')).toContain(
    'Against release 1: 1 entered the catalogue; 1 changed class; 1 renamed; 1 with another position; 1 ruled on otherwise;',
  )
})

it('says in the files of a retraction what it withdraws and why, and has no row in any table', async () => {
  await threeJudged()
  await publishAndMake(scenario)
  const { files } = await publishAndMake(scenario, { kind: 'retraction', corrects: 1, statement: 'Another field.' })
  expect(await readText(scenario, files, 'README.txt')).toContain(
    'THIS IS A RETRACTION. Release 1 is withdrawn and should not be used. Why:\n\nAnother field.',
  )
  for (const name of ['catalogue.csv', 'candidates.csv', 'grades.csv', 'graders.csv', 'changes.csv']) {
    expect((await readText(scenario, files, name)).match(/\r\n/g)).toHaveLength(1)
  }
  expect(await readText(scenario, files, 'catalogue.vot')).toContain('name="retraction"')
  expect(JSON.parse(await readText(scenario, files, 'datacite.json')).relatedIdentifiers).toEqual([
    expect.objectContaining({ relationType: 'Obsoletes', relatedIdentifier: 'http://127.0.0.1:3000/r/north-field/1' }),
  ])
})

it('says both cautions wherever there is place for text', async () => {
  await threeJudged()
  const { files } = await publishAndMake(scenario)
  const WITH_TEXT =
    'README.txt CITATION.txt CITATION.cff datacite.json catalogue-columns.csv catalogue.vot catalogue-binary2.vot catalogue.json rule.json'
  for (const name of WITH_TEXT.split(' ')) {
    const text = await readText(scenario, files, name)
    expect(text, name).toContain('not spectroscopic confirmations')
    expect(text, name).toMatch(/must be registered/)
  }
})

it('packs the same files into the same bytes, wherever and whenever', async () => {
  const archive = async () => {
    const hash = createHash('sha256')
    const members = ['a.txt', 'b/c.png'].map((name) => ({
      name,
      compress: true,
      open: () => Readable.from([Buffer.from(name)]),
    }))
    for await (const part of zipOf(members)) hash.update(part)
    return hash.digest('hex')
  }
  const here = await archive()
  expect(await archive()).toBe(here)
  vi.stubEnv('TZ', 'Pacific/Auckland')
  vi.setSystemTime(new Date('2031-07-01'))
  expect(await archive()).toBe(here)
  vi.unstubAllEnvs()
  vi.useRealTimers()
})

it('passes on the error of a member that cannot be read, so that nobody takes half an archive for a whole one', async () => {
  const broken = Readable.from(
    (async function* () {
      yield Buffer.from('half')
      throw new Error('the disk went away')
    })(),
  )
  const read = async () => {
    for await (const part of zipOf([{ name: 'a', compress: false, open: () => broken }])) void part
  }
  await expect(read()).rejects.toThrow('the disk went away')
})
