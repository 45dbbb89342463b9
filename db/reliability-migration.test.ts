import { Migrator, sql, type Kysely } from 'kysely'
import { beforeEach, afterEach, expect, it } from 'vitest'
import { migrations } from '@/migrations'
import { openDatabase } from './connection'
import { migrateToLatest } from './migrator'
import type { DB } from './schema'

let db: Kysely<DB>
let migrator: Migrator

const TABLES = ['rule', 'run', 'grade', 'verdict', 'state_change', 'candidate']
/** The columns that 006 has, so that what later migrations add is not compared. */
let columns: Record<string, string>

const rows = async (): Promise<unknown> =>
  Promise.all(TABLES.map(async (table) => (await sql.raw(`select ${columns[table]} from ${table}`).execute(db)).rows))

beforeEach(async () => {
  db = openDatabase(':memory:')
  migrator = new Migrator({ db, provider: { getMigrations: async () => migrations } })
  expect((await migrator.migrateTo('006-looks-asked')).error).toBeUndefined()
  const at = "'2026-12-01T10:00:00.000Z'"
  const parameters = `'{"confirmMean":2,"setAsideMean":1,"splitSpread":0.9}'`
  for (const statement of [
    "insert into person values (1, 'avocet@saltmarsh.test', 'avocet', null, 1, 1, '2026', null)",
    `insert into campaign (id, slug, name, survey, acronym, bands, created_by, created_at)
      values (1, 'north', 'North', 'SWS', 'SWS', '["g"]', 1, ${at})`,
    `insert into rule values (1, 1, 1, 'mean', 4, 3, ${parameters}, 1, ${at}), (2, 1, 2, 'mean', 3, 3, ${parameters}, 1, ${at})`,
    `insert into candidate (id, campaign_id, name, imaged_at, grades_given, looks_asked, state_since, created_at)
      values (1, 1, 'SWS1', ${at}, 1, 2, ${at}, ${at})`,
    `insert into grade (uid, campaign_id, candidate_id, person_id, occasion, grade, tags, given_at)
      values ('one', 1, 1, 1, 'first', 'A', '[]', ${at})`,
    `insert into run (campaign_id, rule_id, input_digest, newest_grade_id, newest_candidate_id, summary, created_at)
      values (1, 2, 'digest', 1, 1, '{"grades":1}', ${at})`,
    `insert into verdict (run_id, candidate_id, outcome, grades, cannot_judge, mean, spread, reason)
      values (1, 1, 'confirmed', 1, 0, 3, 0, 'Confirmed.')`,
    `insert into state_change (candidate_id, from_state, to_state, cause, cause_id, at)
      values (1, 'open', 'confirmed', 'verdict', 1, ${at})`,
    `update candidate set state = 'confirmed', state_cause = 'verdict', state_cause_id = 1, verdict_id = 1`,
  ]) {
    await sql.raw(statement).execute(db)
  }
  columns = {}
  for (const table of TABLES) {
    const found = await sql<{ name: string }>`select name from pragma_table_info(${table})`.execute(db)
    columns[table] = found.rows.map(({ name }) => name).join(', ')
  }
})
afterEach(() => db.destroy())

async function expectWhole(before: unknown): Promise<void> {
  expect(await rows()).toEqual(before)
  expect((await sql`select settled, look_value, looks_asked from candidate`.execute(db)).rows).toEqual([
    { settled: 0, look_value: 0, looks_asked: 2 },
  ])
  expect((await sql`select model, newest_left_out_id from run`.execute(db)).rows).toEqual([
    { model: null, newest_left_out_id: 0 },
  ])
  expect((await sql`pragma foreign_key_check`.execute(db)).rows).toEqual([])
  expect((await sql`pragma foreign_keys`.execute(db)).rows).toEqual([{ foreign_keys: 1 }])
  await expect(sql`update rule set grades_wanted = 1`.execute(db)).rejects.toThrow('rule rows are never changed')
  await sql`insert into rule (campaign_id, version, method, grades_wanted, least_grades, parameters, created_by, created_at)
    values (1, 3, 'reliability', 10, 2, '{"falseConfirmed":0.001,"missedLens":0.05}', 1, '2026')`.execute(db)
}

it('keeps rules, runs, grades, verdicts and states of an installation that goes by the mean', async () => {
  const before = await rows()
  await migrateToLatest(db)
  await expectWhole(before)
})

it('is taken for done where the process was killed after it and before the note that it was applied', async () => {
  const before = await rows()
  expect((await migrator.migrateTo('007-reliability')).error).toBeUndefined()
  await sql`delete from kysely_migration where name = '007-reliability'`.execute(db)
  await migrateToLatest(db)
  await expectWhole(before)
})

it('leaves everything as it was where it fails in the middle, and goes through once the cause is gone', async () => {
  const before = await rows()
  const schema = async () =>
    (await sql`select name, sql from sqlite_master where name not like '%kysely%' order by name`.execute(db)).rows
  const made = await schema()
  // A table of this name stands in the way of one of the last statements.
  await sql`create table mention (in_the_way integer)`.execute(db)
  await expect(migrateToLatest(db)).rejects.toThrow(/mention/)
  await sql`drop table mention`.execute(db)
  expect(await schema()).toEqual(made)
  expect(await rows()).toEqual(before)
  await migrateToLatest(db)
  await expectWhole(before)
})
