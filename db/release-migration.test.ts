import { Migrator, sql } from 'kysely'
import { expect, it } from 'vitest'
import { migrations } from '@/migrations'
import { openDatabase } from './connection'

const TABLES = ['release', 'release_access', 'release_candidate', 'release_entry', 'release_file', 'release_given_up']

async function tablesOf(db: ReturnType<typeof openDatabase>): Promise<string[]> {
  const { rows } = await sql<{ name: string }>`
    select name from sqlite_master where type = 'table' and name like 'release%' order by name`.execute(db)
  return rows.map(({ name }) => name)
}

it('014 goes forward and back, and again where a process was killed between the step and its note', async () => {
  const db = openDatabase(':memory:')
  const migrate = new Migrator({ db, provider: { getMigrations: async () => migrations } })
  expect((await migrate.migrateTo('014-releases')).error).toBeUndefined()
  expect(await tablesOf(db)).toEqual(TABLES)
  await sql`delete from kysely_migration where name = '014-releases'`.execute(db)
  expect((await migrate.migrateTo('014-releases')).error).toBeUndefined()
  expect(await tablesOf(db)).toEqual(TABLES)
  await migrations['014-releases'].down!(db as never)
  expect(await tablesOf(db)).toEqual([])
  await migrations['014-releases'].down!(db as never)
  await migrations['014-releases'].up(db as never)
  expect(await tablesOf(db)).toEqual(TABLES)
  await db.destroy()
})

it.each(TABLES)('%s has a trigger against UPDATE and one against DELETE', async (table) => {
  const db = openDatabase(':memory:')
  const migrate = new Migrator({ db, provider: { getMigrations: async () => migrations } })
  await migrate.migrateToLatest()
  const { rows } = await sql<{ name: string }>`
    select name from sqlite_master where type = 'trigger' and tbl_name = ${table}`.execute(db)
  expect(rows.map(({ name }) => name)).toEqual(expect.arrayContaining([`${table}_no_update`, `${table}_no_delete`]))
  await db.destroy()
})
