import { createHash } from 'node:crypto'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { Readable } from 'node:stream'
import Papa from 'papaparse'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { leaveOut } from '@/lib/work/consensus/leave-out'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addGraded, makeReleaseScenario, publishAndMake, type ReleaseScenario } from './_release-scenario'
import { NotARelease, ReleaseZip } from './read-release-zip'
import { reproduce } from './reproduce'
import { inWords } from './run-reproduce'
import { zipOf } from './zip-files'

let scenario: ReleaseScenario
let folder: string
beforeEach(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-reproduce-'))
})
afterEach(async () => {
  await scenario?.end()
  await rm(folder, { recursive: true, force: true })
})

const MEAN = { gradesWanted: 4, leastGrades: 3 }
const RELIABILITY = { method: 'reliability', gradesWanted: 4, leastGrades: 2 } as const

/** Candidates of every fate; stamps, a ruling and somebody left out where asked for. */
async function publish(rule: Parameters<typeof makeReleaseScenario>[0], { leaveOne = false } = {}): Promise<string> {
  scenario = await makeReleaseScenario(rule)
  const { db, lead, graders } = scenario
  for (const [index, letters] of ['AAAB', 'NNNU', 'AANN', 'BB  ', 'AAAA', 'NNCN', 'CBNA', 'BABC'].entries()) {
    await addGraded(scenario, `SWS ${index}, "é"`, letters, { raDeg: 10 + index })
  }
  for (const [name, letters, truth] of [
    ['stamp a', 'AABA', 'lens'],
    ['stamp b', 'NNCN', 'not a lens'],
    ['stamp c', 'BANA', 'lens'],
  ] as const) {
    const id = await addGraded(scenario, name, letters)
    await db.updateTable('candidate').set({ truth }).where('id', '=', id).execute()
  }
  const permit = await scenario.permit(lead, 'lead')
  const ruled = await db.selectFrom('candidate').select('id').where('name', 'like', 'SWS 2%').executeTakeFirstOrThrow()
  await ruleOnCandidate(db, permit, ruled.id, { outcome: 'confirmed', grade: 'B', reason: 'The arc is blue.' })
  if (leaveOne) await leaveOut(db, permit, { personId: graders[3].id, leftOut: true, reason: 'Trained on these.' })
  const { files } = await publishAndMake(scenario)
  const archive = path.join(folder, 'RELEASE.zip')
  const { sha256 } = files.find(({ name }) => name === 'RELEASE.zip')!
  await writeFile(archive, await scenario.tools.blobs.read(sha256))
  return archive
}

/** The same archive with one file otherwise, its checksum put right so that only the grades can tell. */
async function tampered(archive: string, file: string, change: (text: string) => string): Promise<string> {
  const zip = await ReleaseZip.open(archive)
  const names = [...(await zip.text('SHA256SUMS')).matchAll(/ {2}(.+)\n/g)].map(([, name]) => name)
  const texts = new Map<string, string>()
  for (const name of names) texts.set(name, name === file ? change(await zip.text(name)) : await zip.text(name))
  zip.close()
  const sum = (text: string) => createHash('sha256').update(text).digest('hex')
  texts.set('SHA256SUMS', [...texts].map(([name, text]) => `${sum(text)}  ${name}\n`).join(''))
  const members = [...texts].map(([name, text]) => ({
    name,
    compress: true,
    open: () => Readable.from([Buffer.from(text)]),
  }))
  const parts: Uint8Array[] = []
  for await (const part of zipOf(members)) parts.push(part)
  const copy = path.join(folder, 'tampered.zip')
  await writeFile(copy, Buffer.concat(parts))
  return copy
}

it.each([
  ['the mean', MEAN],
  ['reliability', RELIABILITY],
])('finds that all verdicts by %s agree', async (_, rule) => {
  const answer = await reproduce(await publish(rule))
  expect(answer).toMatchObject({ release: 1, verdicts: 8, differences: [] })
  expect(inWords(answer).at(-1)).toBe('All 8 verdicts agree.')
})

it.each([
  ['the mean', MEAN],
  ['reliability', RELIABILITY],
])('leaves out whom the release left out, by %s', async (_, rule) => {
  expect(await reproduce(await publish(rule, { leaveOne: true }))).toMatchObject({ verdicts: 8, differences: [] })
})

it.each([
  ['the mean', MEAN, 'mean'],
  ['reliability', RELIABILITY, 'probability'],
])('finds a grade that was changed afterwards, by %s', async (_, rule, what) => {
  const archive = await publish(rule)
  const copy = await tampered(archive, 'grades.csv', (text) => {
    const changed = text.replace(/("SWS 1, ""é""",G02,first),N,/, '$1,A,')
    expect(changed).not.toBe(text)
    return changed
  })
  const answer = await reproduce(copy)
  expect(answer.differences).toContainEqual(expect.objectContaining({ candidate: 'SWS 1, "é"', what }))
  expect(inWords(answer)[1]).toMatch(/verdicts do(es)? NOT agree/)
})

it('finds calibration counts that were changed, since the probabilities rest on them', async () => {
  const copy = await tampered(await publish(RELIABILITY), 'graders.csv', (text) =>
    text.replace(/^(G02,no,\d+,\d+,\d+),\d+/m, '$1,40'),
  )
  expect((await reproduce(copy)).differences.map(({ what }) => what)).toContain('probability')
})

it('finds a state that no verdict or ruling gives', async () => {
  const copy = await tampered(await publish(MEAN), 'candidates.csv', (text) =>
    text.replace(',set aside,set aside,', ',confirmed,set aside,'),
  )
  expect((await reproduce(copy)).differences).toContainEqual(
    expect.objectContaining({ what: 'state', released: 'confirmed', recomputed: 'set aside' }),
  )
})

it('finds an entry that was taken out of the catalogue', async () => {
  const copy = await tampered(await publish(MEAN), 'catalogue.csv', (text) =>
    text
      .split('\r\n')
      .filter((line) => !line.includes('"SWS 4,'))
      .join('\r\n'),
  )
  expect((await reproduce(copy)).differences).toEqual([
    expect.objectContaining({ candidate: 'SWS 4, "é"', what: 'catalogue', released: 'no entry' }),
    { candidate: 'catalogue.csv', what: 'rows', released: '4 by rule.json', recomputed: '3' },
  ])
})

/** `catalogue.csv` with one field of its first row otherwise. */
const withField = (column: string, value: string) => (text: string) => {
  const [head, first, ...rest] = text.split('\r\n')
  const row = Papa.parse<Record<string, string>>(`${head}\r\n${first}`, { header: true }).data[0]
  expect(row[column]).not.toBe(value)
  return [head, Papa.unparse([{ ...row, [column]: value }], { header: false }), ...rest].join('\r\n')
}

it.each([
  ['designation', 'SWS J999'],
  ['ra', '99'],
  ['dec', '9'],
  ['grade_class', 'C'],
  ['votes_a', '0'],
  ['votes_n', '2'],
  ['n_grades', '9'],
  ['n_cannot_judge', '1'],
  ['mean_points', '1'],
  ['spread_points', '0'],
  ['probability', '0.5'],
  ['decided_by', 'ruling'],
  ['reason', 'Because.'],
])('finds %s of an entry that was changed', async (column, value) => {
  const copy = await tampered(await publish(MEAN), 'catalogue.csv', withField(column, value))
  const { differences } = await reproduce(copy)
  expect(differences).toEqual([
    expect.objectContaining({
      candidate: 'SWS 0, "é"',
      what: expect.stringContaining("the catalogue's"),
      released: value,
    }),
  ])
})

it('counts for itself which grades count', async () => {
  const copy = await tampered(await publish(MEAN), 'grades.csv', (text) => {
    const changed = text.replace(/("SWS 1, ""é""",G02,first,N),yes,/, '$1,no,')
    expect(changed).not.toBe(text)
    return changed
  })
  expect((await reproduce(copy)).differences).toEqual([
    { candidate: 'SWS 1, "é"', what: 'a grade of G02', released: 'not counted', recomputed: 'counted' },
  ])
})

it('finds that all its tables were emptied', async () => {
  let copy = await publish(MEAN)
  for (const file of ['candidates.csv', 'grades.csv', 'catalogue.csv']) {
    copy = await tampered(copy, file, (text) => text.split('\r\n')[0] + '\r\n')
  }
  const { differences } = await reproduce(copy)
  expect(differences).toEqual([
    { candidate: 'candidates.csv', what: 'rows', released: '8 by rule.json', recomputed: '0' },
    { candidate: 'catalogue.csv', what: 'rows', released: '4 by rule.json', recomputed: '0' },
  ])
})

it.each([
  ['cut off', (text: string) => text.slice(0, 50)],
  ["another program's", () => '{}'],
])('refuses an archive whose rule.json is %s in words', async (_, change) => {
  const copy = await tampered(await publish(MEAN), 'rule.json', change)
  await expect(reproduce(copy)).rejects.toThrow(/^rule\.json is not one that this version/)
  await expect(reproduce(copy)).rejects.toBeInstanceOf(NotARelease)
})

it('refuses an archive of which a byte was lost, one that was cut off, and one that is none', async () => {
  const archive = await publish(MEAN)
  const bytes = await readFile(archive)
  const refusal = async (changed: Uint8Array) => {
    const copy = path.join(folder, 'damaged.zip')
    await writeFile(copy, changed)
    return reproduce(copy).then(
      () => 'taken',
      (error: Error) => `${error.name}: ${error.message}`,
    )
  }
  const flipped = Buffer.from(bytes)
  flipped[Math.floor(bytes.length / 3)] ^= 0xff
  expect(await refusal(flipped)).toMatch(/^NotARelease: .*(damaged|differs).*Download/)
  expect(await refusal(bytes.subarray(0, bytes.length / 2))).toMatch(
    /^NotARelease: .*cannot be opened.*Download it again/,
  )
  expect(await refusal(new TextEncoder().encode('hello'))).toMatch(/^NotARelease: /)
  await expect(reproduce(path.join(folder, 'nowhere.zip'))).rejects.toThrow(/There is no file/)
})

it('refuses an archive into which somebody has put another file', async () => {
  const archive = await publish(MEAN)
  const zip = await ReleaseZip.open(archive)
  const sums = await zip.text('SHA256SUMS')
  zip.close()
  const members = [
    { name: 'SHA256SUMS', text: sums },
    { name: 'extra.txt', text: 'x' },
  ]
  const parts: Uint8Array[] = []
  for await (const part of zipOf(
    members.map(({ name, text }) => ({ name, compress: true, open: () => Readable.from([Buffer.from(text)]) })),
  ))
    parts.push(part)
  await writeFile(archive, Buffer.concat(parts))
  await expect(reproduce(archive)).rejects.toThrow(/The archive has no README.txt/)
})

it('releases no stamp, whatever the file', async () => {
  const archive = await publish(RELIABILITY)
  const zip = await ReleaseZip.open(archive)
  for (const name of ['candidates.csv', 'grades.csv', 'catalogue.json', 'changes.csv']) {
    expect(await zip.text(name)).not.toContain('stamp a')
  }
  expect(await zip.text('graders.csv')).toMatch(/^G02,no,8,0,0,1,1,0,0,0,0,0,1,/m)
  zip.close()
})

it.each([
  ['catalogue.vot', '<TD>4</TD>', '<TD>3</TD>', 'n_grades in catalogue.vot'],
  ['catalogue.json', '"n_grades":4', '"n_grades":3', 'n_grades in catalogue.json'],
])('finds that %s says otherwise than catalogue.csv', async (file, before, after, what) => {
  const copy = await tampered(await publish(MEAN), file, (text) => {
    expect(text).toContain(before)
    return text.replace(before, after)
  })
  const answer = await reproduce(copy)
  expect(answer.differences).toEqual([expect.objectContaining({ what, released: '3', recomputed: '4' })])
  expect(inWords(answer).slice(1)).toEqual([
    '1 of 8 verdicts does NOT agree:',
    expect.stringMatching(/n_grades in .* is released as 3, where 4 is expected/),
  ])
})

it('finds a row that a copy of the catalogue lacks', async () => {
  const copy = await tampered(await publish(MEAN), 'catalogue.json', (text) => text.replace(/\{"designation".*\n/, ''))
  expect((await reproduce(copy)).differences.map(({ what }) => what)).toContain('the row of catalogue.json')
})
