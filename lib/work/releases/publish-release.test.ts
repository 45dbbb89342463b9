import { sql } from 'kysely'
import { afterEach, expect, it } from 'vitest'
import { listReleases } from '@/db/queries/releases'
import { listCampaignJobs } from '@/db/queries/jobs'
import { addImagedCandidate } from '@/tests/_support/scenario'
import { ruleOnCandidate } from '@/lib/work/rulings/rule-on-candidate'
import { addGraded, makeReleaseScenario, publishAndMake, RELEASE, type ReleaseScenario } from './_release-scenario'
import { makeAgain } from './make-again'
import { previewRelease } from './preview-release'
import { publishRelease } from './publish-release'
import { ReleaseInput } from './release-input'

let scenario: ReleaseScenario
afterEach(() => scenario.end())

async function judged() {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  const lens = await addGraded(scenario, 'lens', 'AAAB', { raDeg: 10 })
  const none = await addGraded(scenario, 'none', 'NNNN', { raDeg: 11 })
  const lead = await scenario.permit(scenario.lead, 'lead')
  const publish = (input: Partial<ReleaseInput> = {}) => publishRelease(scenario.db, lead, { ...RELEASE, ...input })
  return { lens, none, lead, publish }
}

const released = () => listReleases(scenario.db, scenario.campaign.id)

it('runs the consensus first, so that grades of this moment are in it', async () => {
  const { publish } = await judged()
  expect(await publish()).toMatchObject({ number: 1 })
  expect((await released())[0]).toMatchObject({ number: 1, entries: 1, candidates: 2, made: 0, access: 'private' })
  expect(await listCampaignJobs(scenario.db, scenario.campaign.id)).toContainEqual(
    expect.objectContaining({ kind: 'make-release', state: 'queued' }),
  )
})

it('counts on: 1, 2, 3, whatever the kind, and says what an erratum or a retraction is about', async () => {
  await judged()
  await publishAndMake(scenario)
  await publishAndMake(scenario, { kind: 'erratum', corrects: 1, statement: 'A position was wrong.' })
  await publishAndMake(scenario, { kind: 'retraction', corrects: 2, statement: 'The cutouts were mixed up.' })
  const [third, second, first] = await released()
  expect([first.number, second.number, third.number]).toEqual([1, 2, 3])
  expect(second).toMatchObject({
    kind: 'erratum',
    corrects_id: first.id,
    statement: 'A position was wrong.',
    entries: 1,
  })
  expect(third).toMatchObject({ kind: 'retraction', corrects_id: second.id, entries: 0, candidates: 0 })
})

it.each(['reader', 'grader', 'stranger'] as const)('is refused to a %s, who gets no permit to lead', async (who) => {
  await judged()
  const viewer = who === 'grader' ? scenario.graders[0] : scenario[who]
  await expect(scenario.permit(viewer, 'lead')).rejects.toMatchObject({ status: who === 'stranger' ? 404 : 403 })
})

it('is refused while something confirmed has no position, with its name and what to do', async () => {
  const { lens, publish } = await judged()
  await scenario.db.updateTable('candidate').set({ ra_deg: null, dec_deg: null }).where('id', '=', lens).execute()
  await expect(publish()).rejects.toMatchObject({
    type: 'no-position',
    message: expect.stringMatching(/^lens is confirmed, but it has no position.*manifest/),
  })
  expect(await released()).toEqual([])
})

it('is refused with nothing confirmed unless that is meant', async () => {
  const { lens, lead, publish } = await judged()
  await ruleOnCandidate(scenario.db, lead, lens, { outcome: 'set aside', grade: null, reason: 'A spiral arm.' })
  await expect(publish()).rejects.toMatchObject({
    type: 'nothing-confirmed',
    invalidParameters: [{ name: 'emptyIsMeant', reason: expect.any(String) }],
  })
  await publish({ emptyIsMeant: true })
  expect((await released())[0]).toMatchObject({ entries: 0, candidates: 2 })
})

it('is refused while the files of the one before are being made', async () => {
  const { publish } = await judged()
  await publish()
  await expect(publish()).rejects.toMatchObject({ status: 409, type: 'release-being-made' })
  expect(await released()).toHaveLength(1)
})

it.each<[string, Partial<ReleaseInput>, string]>([
  ['a release that is none', { kind: 'erratum', corrects: 7, statement: 'x' }, 'corrects'],
  ['no release at all', { kind: 'retraction', statement: 'x' }, 'corrects'],
])('refuses a correction of %s', async (_, input, field) => {
  const { publish } = await judged()
  const error = await publish(input).catch((thrown: unknown) => thrown)
  expect(JSON.stringify(error)).toContain(field)
  expect(await released()).toEqual([])
})

it('withdraws a release once', async () => {
  const { publish } = await judged()
  await publishAndMake(scenario)
  await publishAndMake(scenario, { kind: 'retraction', corrects: 1, statement: 'Wrong field.' })
  await expect(publish({ kind: 'retraction', corrects: 1, statement: 'Again.' })).rejects.toThrow(/withdrawn already/)
})

it.each<[string, Partial<Record<keyof ReleaseInput, unknown>>]>([
  ['title', { title: ' ' }],
  ['description', { description: '' }],
  ['authors', { authors: '\n \n' }],
  ['licence', { licence: 'all mine' }],
  ['licenceWords', { licence: 'words', licenceWords: ' ' }],
  ['publisher', { publisher: '' }],
  ['year', { year: 'soon' }],
  ['statement', { kind: 'erratum', corrects: 1, statement: '' }],
  ['cautionsRead', { cautionsRead: undefined }],
  ['title', { title: 'bell \u0007' }],
])('names the field %s where it cannot be used, and writes nothing', async (field, input) => {
  const { publish } = await judged()
  const error = await publish(input as Partial<ReleaseInput>).catch((thrown: unknown) => thrown)
  expect(error).toMatchObject({ issues: expect.arrayContaining([expect.objectContaining({ path: [field] })]) })
  expect(await released()).toEqual([])
})

it('names the tick of the cautions where a form leaves it out, alone and beside other fields', () => {
  const { cautionsRead: _left, ...form } = RELEASE
  const fields = (input: object) => ReleaseInput.safeParse(input).error?.issues.map(({ path }) => path[0])
  expect(fields(form)).toEqual(['cautionsRead'])
  expect(fields({ ...form, title: '' })).toEqual(expect.arrayContaining(['title', 'cautionsRead']))
})

it('shows before what would be in it, what has come since, and what can be told from it', async () => {
  const { lens, lead } = await judged()
  expect(await previewRelease(scenario.db, lead)).toMatchObject({
    number: 1,
    confirmed: 0,
    gradesSinceRun: 8,
    before: null,
  })
  await addImagedCandidate(scenario.db, scenario.campaign, 'nobody has seen it')
  expect(await previewRelease(scenario.db, lead)).toMatchObject({ unjudged: 1 })
  await publishAndMake(scenario)
  expect(await previewRelease(scenario.db, lead)).toMatchObject({ unjudged: 1 })
  await addGraded(scenario, 'late', 'AAAA', { raDeg: 12 })
  await ruleOnCandidate(scenario.db, lead, lens, { outcome: 'set aside', grade: null, reason: 'A spiral arm.' })
  const stamp = await addGraded(scenario, 'stamp', 'AAAA')
  await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', stamp).execute()
  expect(await previewRelease(scenario.db, lead)).toMatchObject({
    number: 2,
    before: 1,
    confirmed: 0,
    left: ['SWS J004000.00+021200.0'],
    leftCount: 1,
    enteredCount: 0,
    stamps: 1,
    correctable: [{ number: 1 }],
    last: { title: RELEASE.title, licence: 'CC-BY-4.0' },
  })
})

it.each(['release', 'release_candidate', 'release_entry', 'release_file', 'release_access'])(
  'never changes a row of %s and never takes one away',
  async (table) => {
    const { lead } = await judged()
    const { release } = await publishAndMake(scenario)
    await sql`insert into release_access (release_id, access, changed_by, changed_at)
      values (${release.id}, 'public', ${lead.viewer.id}, '2026')`.execute(scenario.db)
    const column = table === 'release' ? 'id' : 'release_id'
    const tried = [
      `update ${table} set ${column} = ${column} where ${column} = ${release.id}`,
      `delete from ${table} where ${column} = ${release.id}`,
    ]
    for (const statement of tried) {
      await expect(sql.raw(statement).execute(scenario.db)).rejects.toThrow(`${table} rows are never changed`)
    }
  },
)

it('takes nothing more once its archive is there: no candidate, no entry, no file', async () => {
  const { none } = await judged()
  const { release } = await publishAndMake(scenario)
  const late = await addGraded(scenario, 'late', 'AAAA')
  const adds = [
    `insert into release_candidate (release_id, candidate_id, name, state, first_pass) values (${release.id}, ${late}, 'late', 'open', 'waiting')`,
    `insert into release_entry (release_id, row_number, candidate_id, entry_key, designation, name, ra_deg, dec_deg, votes_a, votes_b,
      votes_c, votes_n, cannot_judge, decided_by, reason, known_as, n_measured, stamps)
      values (${release.id}, 2, ${none}, 'k', 'k', 'k', 1, 1, 0, 0, 0, 0, 0, 'ruling', '', '[]', 0, '{}')`,
    `insert into release_file values (${release.id}, 'more.txt', 'text/plain', 1, '${'0'.repeat(64)}')`,
  ]
  for (const statement of adds) await expect(sql.raw(statement).execute(scenario.db)).rejects.toThrow(/is complete/)
})

it('takes no calibration stamp, even past the use case', async () => {
  const { publish } = await judged()
  const { id } = await publish()
  const stamp = await addGraded(scenario, 'stamp', 'AAAA')
  await scenario.db.updateTable('candidate').set({ truth: 'lens' }).where('id', '=', stamp).execute()
  const statement = `insert into release_candidate (release_id, candidate_id, name, state, first_pass) values (${id}, ${stamp}, 's', 'open', 'waiting')`
  await expect(sql.raw(statement).execute(scenario.db)).rejects.toThrow(/calibration/)
})

it('has its files made again on demand, until they are there', async () => {
  const { lead, publish } = await judged()
  const { number } = await publish()
  await scenario.db.deleteFrom('job').execute()
  await makeAgain(scenario.db, lead, number)
  expect(await listCampaignJobs(scenario.db, scenario.campaign.id)).toMatchObject([{ kind: 'make-release' }])
  await expect(makeAgain(scenario.db, lead, 9)).rejects.toMatchObject({ status: 404 })
  const { makeRelease } = await import('./make-release')
  await makeRelease(scenario.tools, (await released())[0].id, async () => {})
  await expect(makeAgain(scenario.db, lead, number)).rejects.toMatchObject({ type: 'made-already' })
})
