import { mkdir, writeFile } from 'node:fs/promises'
import path from 'node:path'
import { sql } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { findList } from '@/db/queries/reference-lists'
import { listTakenKeys } from '@/db/queries/release-making'
import { listReleaseEntries } from '@/db/queries/releases'
import { fromJson } from '@/db/schema/values'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { addList, match } from '@/lib/work/matching/_matching-scenario'
import { bringBackList, requestListMatching, retireList } from '@/lib/work/matching/change-list'
import { decideObject } from '@/lib/work/matching/decide-match'
import { knownList } from '@/lib/work/matching/known-page'
import { matchListJob } from '@/lib/work/matching/list-jobs'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { runDueJobs } from '@/lib/platform/jobs/run-jobs'
import { stampPath } from '@/lib/work/stamps/stamp-store'
import { addReleaseAt } from '@/tests/_support/released-entries'
import { freeKey } from './entry-key'
import { makeRelease } from './make-release'
import { publishRelease } from './publish-release'
import { addGraded, makeReleaseScenario, RELEASE, type ReleaseScenario } from './_release-scenario'

let scenario: ReleaseScenario
let permit: CampaignPermit<'lead'>
beforeEach(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  permit = await scenario.permit(scenario.lead, 'lead')
})
afterEach(() => scenario.end())

const publish = () => publishRelease(scenario.db, permit, RELEASE)

/** The names that each entry is known as, once the job has made them. */
async function knownAs(id: number): Promise<string[][]> {
  await makeRelease(scenario.tools, id, async () => {})
  const entries = await listReleaseEntries(scenario.db, id, { after: 0, limit: 9 })
  return entries.map((entry) => fromJson(entry.known_as).map(({ name }) => name))
}

const atTen = { raDeg: 10, decDeg: 1 }

describe('what is known of an entry', () => {
  it.each(['retired', 'told to differ', 'moved'])('is as it was frozen, where it is %s before the job', async (how) => {
    const lens = await addGraded(scenario, 'lens', 'AAAA', atTen)
    const list = await addList(scenario, [{ name: 'Old ring', ...atTen }])
    await match(scenario.db, scenario.campaign.id)
    const { id } = await publish()
    if (how === 'retired') await retireList(scenario.db, permit, list)
    else if (how === 'moved') {
      await scenario.db.updateTable('candidate').set({ ra_deg: 90 }).where('id', '=', lens).execute()
      await match(scenario.db, scenario.campaign.id)
    } else {
      await decideObject(scenario.db, permit, lens, { list, row: 1, decision: 'different', reason: 'Beside it.' })
    }
    expect(await knownAs(id)).toEqual([['Old ring']])
  })

  it('leaves out what had been told to differ, and lists the nearest first', async () => {
    const lens = await addGraded(scenario, 'lens', 'AAAA', atTen)
    await addGraded(scenario, 'new', 'AAAA', { raDeg: 50 })
    const list = await addList(scenario, [
      { name: 'wide', raDeg: 10, decDeg: 1 + 1.5 / 3600 },
      { name: 'near', raDeg: 10, decDeg: 1 + 0.5 / 3600 },
      { name: 'other', ...atTen },
    ])
    await match(scenario.db, scenario.campaign.id)
    await decideObject(scenario.db, permit, lens, { list, row: 3, decision: 'different', reason: 'Beside it.' })
    const { id } = await publish()
    expect(await knownAs(id)).toEqual([['near', 'wide'], []])
  })

  it('is found first, where candidates still wait to be matched', async () => {
    await addGraded(scenario, 'lens', 'AAAA', atTen)
    await addList(scenario, [{ name: 'Old ring', ...atTen }])
    const { id } = await publish()
    expect(await knownAs(id)).toEqual([['Old ring']])
  })

  it('is waited for while a list is being read', async () => {
    await addGraded(scenario, 'lens', 'AAAA', atTen)
    const list = await addList(scenario, [{ name: 'Old ring', ...atTen }])
    await scenario.db.updateTable('reference_list').set({ state: 'reading' }).where('id', '=', list).execute()
    const reading = { kind: JOB.readList, campaignId: scenario.campaign.id, payload: { listId: list } }
    await enqueueJob(scenario.db, reading)
    await expect(publish()).rejects.toMatchObject({
      status: 409,
      type: 'being-matched',
      message: 'The known objects of Marsh lenses are still being read. Publish when that is done.',
    })
    await expect(retireList(scenario.db, permit, list)).rejects.toThrow(/is being read/)
    expect(await scenario.db.selectFrom('release').select('id').execute()).toEqual([])
    // Reading it was given up.
    await scenario.db.updateTable('job').set({ state: 'failed' }).where('kind', '=', JOB.readList).execute()
    await expect(publish()).rejects.toThrow('was not read to its end. Take it in again, or retire it; then publish.')
    expect(await knownList(scenario.db, permit, list)).toMatchObject({
      state: 'refused',
      reason: expect.stringContaining('Take it in again') as string,
    })
    await retireList(scenario.db, permit, list)
    expect(await knownAs((await publish()).id)).toEqual([[]])
    await bringBackList(scenario.db, permit, list)
    const { state } = (await findList(scenario.db, scenario.campaign.id, list))!
    expect(state).toBe('draft')
  })

  it('is waited for while a list has still to be matched, or could not be, until a job has', async () => {
    await addGraded(scenario, 'lens', 'AAAA', atTen)
    const list = { id: await addList(scenario, [{ name: 'Old ring', ...atTen }]), campaignId: scenario.campaign.id }
    await requestListMatching(scenario.db, list)
    await expect(publish()).rejects.toThrow(/Marsh lenses are still being compared/)
    await scenario.db.updateTable('job').set({ state: 'failed', unique_key: null }).execute()
    await expect(publish()).rejects.toThrow(/could not be compared.*Marsh lenses.*retire it/)
    await requestListMatching(scenario.db, list)
    await runDueJobs(scenario.db, { 'match-list': matchListJob })
    expect(await knownAs((await publish()).id)).toEqual([['Old ring']])
  })

  it('keeps nothing waiting that is withdrawn', async () => {
    await addGraded(scenario, 'lens', 'AAAA', atTen)
    await makeRelease(scenario.tools, (await publish()).id, async () => {})
    const list = await addList(scenario, [{ name: 'Old ring', ...atTen }])
    await scenario.db.updateTable('reference_list').set({ state: 'reading' }).where('id', '=', list).execute()
    const retraction = { ...RELEASE, kind: 'retraction' as const, corrects: 1, statement: 'Another field.' }
    expect(await publishRelease(scenario.db, permit, retraction)).toMatchObject({ number: 2 })
  })
})

it('has the pictures of the recipe that was in force, not of one that came before its job', async () => {
  const lens = await addGraded(scenario, 'lens', 'AAAA', atTen)
  const { db, campaign, lead, tools } = scenario
  const { id } = await publish()
  await sql`insert into recipe (campaign_id, version, parameters, hash, created_by, created_at)
    values (${campaign.id}, 9, '{}', 'later', ${lead.id}, '2026')`.execute(db)
  const later = 'ab'.repeat(32)
  await sql`insert into stamp (campaign_id, candidate_id, recipe_id, view, sha256, bytes, width, height)
    select ${campaign.id}, ${lens}, max(id), 'colour', ${later}, 1, 1, 1 from recipe`.execute(db)
  await mkdir(path.dirname(stampPath(tools.stampFolder, later)), { recursive: true })
  await writeFile(stampPath(tools.stampFolder, later), 'later')
  await makeRelease(tools, id, async () => {})
  const [entry] = await listReleaseEntries(db, id, { after: 0, limit: 9 })
  expect(new TextDecoder().decode(await tools.blobs.read(entry.thumbnail!))).toBe('PNG of lens')
})

it('finds a free key for a third designation that reads the same in an address, also pages later', async () => {
  const { db, campaign, lead } = scenario
  await sql`drop trigger release_entry_no_update`.execute(db)
  const places = Array.from({ length: 4 }, (_, index) => [index, 0] as const)
  const id = await addReleaseAt(db, campaign, lead.id, places)
  for (const [index, key] of ['K', 'K_2', 'K_west', 'Kx'].entries()) {
    await db
      .updateTable('release_entry')
      .set({ entry_key: key })
      .where('row_number', '=', index + 1)
      .execute()
  }
  const taken = await listTakenKeys(db, id, ['K'])
  expect([...taken].toSorted()).toEqual(['K', 'K_2'])
  expect(freeKey('K', taken)).toBe('K_3')
})
