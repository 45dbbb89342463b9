import { Migrator, sql, type Kysely } from 'kysely'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { migrations } from '@/migrations'
import { openDatabase } from './connection'
import type { DB } from './schema'

let db: Kysely<DB>
let migrator: Migrator
const AT = "'2026-12-01T10:00:00.000Z'"

const rowsOf = async (query: string) => (await sql.raw(query).execute(db)).rows
const to = async (name: string) => expect((await migrator.migrateTo(name)).error).toBeUndefined()

beforeEach(async () => {
  db = openDatabase(':memory:')
  migrator = new Migrator({ db, provider: { getMigrations: async () => migrations } })
  await to('010-queue-counts')
  for (const statement of [
    `insert into person (id, name, created_at) values (1, 'avocet', ${AT})`,
    `insert into campaign (id, slug, name, survey, acronym, bands, created_by, created_at)
      values (1, 'north', 'North', 'SWS', 'SWS', '["g"]', 1, ${AT}), (2, 'south', 'South', 'SWS', 'SWS', '["g"]', 1, ${AT})`,
    `insert into candidate (id, campaign_id, name, ra_deg, dec_deg, truth, state_since, created_at) values
      (1, 1, 'placed', 10, 5, null, ${AT}, ${AT}), (2, 1, 'nowhere', null, null, null, ${AT}, ${AT}),
      (3, 1, 'calibration', 10, 5, 'lens', ${AT}, ${AT})`,
  ]) {
    await sql.raw(statement).execute(db)
  }
})
afterEach(() => db.destroy())

async function expectDue(): Promise<void> {
  expect(await rowsOf('select campaign_id, candidate_id from match_due')).toEqual([{ campaign_id: 1, candidate_id: 1 }])
  expect(await rowsOf('select kind, campaign_id, unique_key, payload, state from job')).toEqual([
    {
      kind: 'match-candidates',
      campaign_id: 1,
      unique_key: 'match-candidates:1',
      payload: '{"campaignId":1}',
      state: 'queued',
    },
  ])
  expect(await rowsOf('pragma foreign_key_check')).toEqual([])
}

it('has what is here already matched once, calibration stamps and what has no place left out', async () => {
  await to('012-matching')
  await expectDue()
  expect(await rowsOf('select match_radius_arcsec from campaign')).toEqual([
    { match_radius_arcsec: 2 },
    { match_radius_arcsec: 2 },
  ])
})

it('does nothing again where a kill came between its step and its note', async () => {
  await to('012-matching')
  await sql`delete from kysely_migration where name = '012-matching'`.execute(db)
  await to('012-matching')
  await expectDue()
})

it('goes back and leaves candidates, campaigns and the jobs of others', async () => {
  await to('012-matching')
  await sql
    .raw(
      `insert into job (kind, payload, run_after, created_at, updated_at)
    values ('consensus', '{}', ${AT}, ${AT}, ${AT})`,
    )
    .execute(db)
  await to('010-queue-counts')
  expect(await rowsOf('select kind from job')).toEqual([{ kind: 'consensus' }])
  expect(await rowsOf('select id from candidate')).toHaveLength(3)
  const left = await rowsOf(`select name from sqlite_master where name like '%match%' or name like 'reference%'`)
  expect(left).toEqual([])
  await sql`update candidate set ra_deg = 11 where id = 1`.execute(db)
})
