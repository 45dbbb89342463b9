import { Migrator, sql, type Kysely } from 'kysely'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { migrations } from '@/migrations'
import * as lateGrades from '@/migrations/016-late-grades'
import { countersAndRecount } from '@/tests/_support/recount-queue'
import { openDatabase } from './connection'
import type { DB } from './schema'

const BEFORE = '015-listing'
const AT = "'2026-12-01T10:00:00.000Z'"
let db: Kysely<DB>
let migrator: Migrator

const run = async (statements: readonly string[]): Promise<void> => {
  for (const statement of statements) await sql.raw(statement).execute(db)
}
const all = async (query: string): Promise<unknown[]> => (await sql.raw(query).execute(db)).rows
const grade = (uid: string, candidate: number, person: number, occasion: string, replaces: number | null = null) =>
  `insert into grade (uid, campaign_id, candidate_id, person_id, occasion, grade, tags, remark, replaces, given_at)
    values ('${uid}', 1, ${candidate}, ${person}, '${occasion}', 'A', '["arc"]', 'faint', ${replaces}, ${AT})`
/** Every index and trigger, and the columns of the table. */
const around = () =>
  all("select type, name, tbl_name, sql from sqlite_schema where type in ('index', 'trigger') order by name")

beforeEach(async () => {
  db = openDatabase(':memory:')
  migrator = new Migrator({ db, provider: { getMigrations: async () => migrations } })
  expect((await migrator.migrateTo(BEFORE)).error).toBeUndefined()
  await run([
    "insert into person values (1, 'avocet@saltmarsh.test', 'avocet', null, 1, 1, '2026', null)",
    "insert into person values (2, 'curlew@saltmarsh.test', 'curlew', null, 0, 1, '2026', null)",
    `insert into campaign (id, slug, name, survey, acronym, bands, created_by, created_at)
      values (1, 'north', 'North', 'SWS', 'SWS', '["g"]', 1, ${AT})`,
    ...[1, 2].map(
      (id) => `insert into candidate (id, campaign_id, name, imaged_at, grades_given, state_since, created_at)
        values (${id}, 1, 'SWS${id}', ${AT}, 1, ${AT}, ${AT})`,
    ),
    grade('one', 1, 1, 'first'),
    grade('two', 1, 1, 'first', 1),
    grade('three', 1, 1, 'repeat'),
    grade('four', 2, 2, 'first'),
    `insert into asked_look (campaign_id, candidate_id, person_id, asked_by, asked_at, grade_id) values (1, 1, 1, 1, ${AT}, 2)`,
    `insert into repeat_look (campaign_id, candidate_id, person_id, turned, lent_at, grade_id) values (1, 1, 1, 3, ${AT}, 3)`,
  ])
})
afterEach(() => db.destroy())

it('keeps every grade, reference, counter, index and trigger, forth and back', async () => {
  const [rows, made] = [await all('select * from grade'), await around()]
  expect(rows).toHaveLength(4)
  expect((await migrator.migrateTo('016-late-grades')).error).toBeUndefined()
  expect(await all('select * from grade')).toEqual(rows)
  expect((await around()).filter((part) => (part as { name: string }).name !== 'grade_one_late')).toEqual(made)
  expect(await all('pragma foreign_key_check')).toEqual([])
  expect((await migrator.migrateTo(BEFORE)).error).toBeUndefined()
  expect(await all('select * from grade')).toEqual(rows)
  expect(await around()).toEqual(made)
  await expect(run([grade('x', 2, 1, 'late')])).rejects.toThrow('CHECK constraint failed')
})

it('takes one late grade of a person and candidate, corrections of it, counts them as looks, and lets none be changed', async () => {
  await migrator.migrateToLatest()
  await run([grade('late', 2, 1, 'late')])
  await expect(run([grade('again', 2, 1, 'late')])).rejects.toThrow('UNIQUE constraint failed')
  await expect(run([grade('other', 2, 1, 'first', 5)])).rejects.toThrow(
    'a correction replaces a grade of the same person',
  )
  await run([grade('corrected', 2, 1, 'late', 5)])
  await expect(run(["update grade set grade = 'N'"])).rejects.toThrow('grade rows are never changed')
  await expect(run(['delete from grade'])).rejects.toThrow('grade rows are never changed')
  await expect(run([grade('odd', 2, 1, 'early')])).rejects.toThrow('CHECK constraint failed')
  const { kept, counted } = await countersAndRecount(db)
  expect(kept).toEqual(counted)
})

it('takes late grades with it on the way back, and what was counted of them', async () => {
  await migrator.migrateToLatest()
  await run([grade('late', 2, 1, 'late'), grade('corrected', 2, 1, 'late', 5), grade('late too', 1, 2, 'late')])
  expect((await migrator.migrateTo(BEFORE)).error).toBeUndefined()
  expect(await all('select uid from grade order by id')).toEqual(
    ['one', 'two', 'three', 'four'].map((uid) => ({ uid })),
  )
  const { kept, counted } = await countersAndRecount(db)
  expect(kept).toEqual(counted)
})

it('does nothing where it was done and a kill kept its note from being written', async () => {
  await migrator.migrateToLatest()
  const whole = await all('select sql from sqlite_schema order by name')
  await lateGrades.up(db as Kysely<unknown>)
  expect(await all('select sql from sqlite_schema order by name')).toEqual(whole)
  await lateGrades.down(db as Kysely<unknown>)
  await lateGrades.down(db as Kysely<unknown>)
  await lateGrades.up(db as Kysely<unknown>)
  expect(await all('select sql from sqlite_schema order by name')).toEqual(whole)
})
