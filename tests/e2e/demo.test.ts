import { execFile } from 'node:child_process'
import { rm } from 'node:fs/promises'
import path from 'node:path'
import { promisify } from 'node:util'
import { sql, type Kysely } from 'kysely'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { openDatabase } from '@/db/connection'
import { listReleaseFiles, listReleases } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { practiceFirst, practiceUseful } from '@/lib/work/calibration/practice'
import { duplicatesPage } from '@/lib/work/matching/duplicates-page'
import { knownLabels } from '@/lib/work/matching/known-labels'
import { standingMeasurements } from '@/lib/work/measuring/standing-measurements'
import { permitCampaign } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'
import { leftToLookAt } from '@/lib/work/queue/left-to-look-at'
import { makeDataFolder } from './_server'

const SLUG = 'first-light-north-field'
let folder: string
let db: Kysely<DB>

async function makeDemo(): Promise<string> {
  const script = ['node_modules/tsx/dist/cli.mjs', '--conditions=react-server', 'fixtures/demo/make-demo.ts']
  const env = { ...process.env, RINGSIDE_DATA: folder }
  const { stdout, stderr } = await promisify(execFile)(process.execPath, script, { env })
  expect(stderr).toBe('')
  return stdout
}

async function viewer(name: string): Promise<Viewer> {
  const row = await db.selectFrom('person').selectAll().where('name', '=', name).executeTakeFirstOrThrow()
  return { id: row.id, name, email: row.email!, isAdmin: row.is_admin === 1 }
}
const lead = async () => permitCampaign(db, await viewer('avocet'), SLUG, 'lead')

/** Rows of every table, but for what any run of the product adds: jobs and the site's notes. */
async function rowsOfTables(): Promise<Record<string, number>> {
  const { rows } = await sql<{ name: string }>`select name from sqlite_schema
    where type = 'table' and name not like 'sqlite_%' and name not in ('job', 'site') order by name`.execute(db)
  const counts: Record<string, number> = {}
  for (const { name } of rows) {
    const { rows: found } = await sql<{ rows: number }>`select count(*) as rows from ${sql.table(name)}`.execute(db)
    counts[name] = found[0].rows
  }
  return counts
}

beforeAll(async () => {
  folder = await makeDataFolder()
  expect(await makeDemo()).toContain('79 candidates simulated')
  db = openDatabase(path.join(folder, 'ringside.sqlite'))
})
afterAll(async () => {
  await db?.destroy()
  await rm(folder, { recursive: true, force: true })
})

it('has candidates in every state, some with redshifts, all imaged', async () => {
  const candidates = await db.selectFrom('candidate').selectAll().where('truth', 'is', null).execute()
  expect(candidates).toHaveLength(73)
  expect(new Set(candidates.map(({ state }) => state))).toEqual(new Set(['open', 'split', 'confirmed', 'set aside']))
  expect(candidates.filter(({ imaged_at }) => imaged_at === null)).toEqual([])
  expect(candidates.filter(({ lens_redshift }) => lens_redshift !== null).length).toBeGreaterThan(10)
})

it('has calibration stamps, painted and told, among the others by name, number and files', async () => {
  const stamps = await db.selectFrom('candidate').selectAll().where('truth', 'is not', null).execute()
  const told = (truth: string, painted: boolean) =>
    stamps.filter((stamp) => stamp.truth === truth && (stamp.painted_over !== null) === painted).length
  expect([told('lens', false), told('not a lens', false), told('lens', true), told('not a lens', true)]).toEqual([
    3, 3, 4, 2,
  ])
  const { names, ids } = await db
    .selectFrom('candidate')
    .select([sql<string>`max(name)`.as('names'), sql<number>`max(id)`.as('ids')])
    .where('truth', 'is', null)
    .executeTakeFirstOrThrow()
  for (const { id, name, explanation } of stamps) {
    expect(name).toMatch(/^SWS\d{4}$/)
    expect(name < names && id < ids, name).toBe(true)
    expect(explanation).not.toBeNull()
    expect(await db.selectFrom('plane').select('band').where('candidate_id', '=', id).execute()).toHaveLength(3)
  }
})

it('leaves the whole queue to whimbrel, who may practise and need not', async () => {
  const permit = await permitCampaign(db, await viewer('whimbrel'), SLUG, 'grade')
  const own = await db.selectFrom('grade').select('id').where('person_id', '=', permit.viewer.id).execute()
  expect(own).toEqual([])
  const { open } = await db
    .selectFrom('candidate')
    .select((e) => e.fn.countAll<number>().as('open'))
    .where('settled', '=', 0)
    .where('truth', 'is', null)
    .executeTakeFirstOrThrow()
  expect(await leftToLookAt(db, permit, 0)).toBeGreaterThanOrEqual(open)
  expect(open).toBeGreaterThan(0)
  expect(await practiceFirst(db, permit)).toBeNull()
  expect(await practiceUseful(db, permit)).toBe(true)
})

it('knows two confirmed lenses from the pilot fields, and proposes one pair as one object', async () => {
  const confirmed = await db.selectFrom('candidate').select('id').where('state', '=', 'confirmed').execute()
  const labels = await knownLabels(
    db,
    await lead(),
    confirmed.map(({ id }) => id),
  )
  const known = [...labels.values()].flat()
  expect(known.map(({ name }) => name).sort()).toEqual(['SWS-PILOT 03', 'SWS-PILOT 07'])
  const { groups } = await duplicatesPage(db, await lead())
  expect(groups.map(({ members }) => members.length)).toEqual([2])
})

it('has three radii, each measured by two people', async () => {
  const ids = await db.selectFrom('candidate').select('id').execute()
  const standing = await standingMeasurements(
    db,
    await lead(),
    ids.map(({ id }) => id),
  )
  expect([...standing.values()].map(({ count }) => count)).toEqual([2, 2, 2])
})

it('shares a view and has a public release 1 with its files', async () => {
  expect(await db.selectFrom('saved_view').select(['shared', 'page']).execute()).toEqual([
    { shared: 1, page: 'candidates' },
  ])
  const { campaign } = await lead()
  const [release, ...more] = await listReleases(db, campaign.id)
  expect(more).toEqual([])
  expect(release).toMatchObject({ number: 1, access: 'public', made: 1, authors: 'The Saltmarsh Wide Survey team' })
  expect(release.entries).toBeGreaterThan(10)
  expect((await listReleaseFiles(db, release.id)).map(({ name }) => name)).toContain('RELEASE.zip')
})

it('is not changed by a second run', async () => {
  const before = await rowsOfTables()
  expect(await makeDemo()).toContain('nothing was changed')
  expect(await rowsOfTables()).toEqual(before)
})

it('is completed and not doubled by a second run where the first was cut off', async () => {
  const before = await rowsOfTables()
  await db.deleteFrom('site').where('key', '=', 'demo-made').execute()
  expect(await makeDemo()).toContain('confirmed')
  const { run, audit_event: _, ...after } = await rowsOfTables()
  const { run: _run, audit_event: _events, ...stands } = before
  expect(after).toEqual(stands)
  expect(run - before.run).toBeLessThanOrEqual(1)
})

it('is not put into a site that people use', async () => {
  await db.updateTable('person').set({ email: 'someone@elsewhere.test' }).where('name', '=', 'egret').execute()
  await db.deleteFrom('site').where('key', '=', 'demo-made').execute()
  const before = await rowsOfTables()
  await expect(makeDemo()).rejects.toMatchObject({ code: 1, stderr: expect.stringContaining('egret among them') })
  expect(await rowsOfTables()).toEqual(before)
})
