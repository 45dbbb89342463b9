import { Migrator, sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { openDatabase, openMemoryDatabase } from './connection'
import { migrateToLatest, migrateToNothing } from './migrator'
import { migrations } from '@/migrations'
import { addImagedCandidate, makeScenario } from '@/tests/_support/scenario'

describe('migrations', () => {
  it('go forward, back to nothing and forward again to the same schema', async () => {
    const db = openDatabase(':memory:')
    const schema = async () =>
      (
        await sql<{ sql: string }>`select sql from sqlite_master where name not like '%kysely%' order by name`.execute(
          db,
        )
      ).rows
    await migrateToLatest(db)
    const first = await schema()
    expect(first.length).toBeGreaterThan(20)
    await migrateToNothing(db)
    expect(await schema()).toEqual([])
    await migrateToLatest(db)
    expect(await schema()).toEqual(first)
    await db.destroy()
  })

  it('apply nothing the second time', async () => {
    const db = await openMemoryDatabase()
    expect(await migrateToLatest(db)).toEqual([])
    await db.destroy()
  })
})

describe('tables that only grow', () => {
  const GROWS_ONLY =
    'rule recipe grade run verdict ruling state_change designation entry audit_event judgement_shown measurement match_decision merge'.split(
      ' ',
    )

  it.each(GROWS_ONLY)('%s has a trigger against UPDATE and one against DELETE', async (table) => {
    const db = await openMemoryDatabase()
    const found = await sql<{ name: string }>`
      select name from sqlite_master where type = 'trigger' and tbl_name = ${table}`.execute(db)
    const names = found.rows.map((row) => row.name)
    expect(names).toContain(`${table}_no_update`)
    expect(names).toContain(`${table}_no_delete`)
    await db.destroy()
  })

  it('refuse to change or delete a rule that is there', async () => {
    const { db, campaign } = await makeScenario()
    const change = db.updateTable('rule').set({ grades_wanted: 1 }).where('campaign_id', '=', campaign.id).execute()
    await expect(change).rejects.toThrow('rule rows are never changed')
    await expect(db.deleteFrom('rule').execute()).rejects.toThrow('rule rows are never changed')
    await db.destroy()
  })

  it('take one first grade per person and candidate, and corrections only of the own grade', async () => {
    const { db, campaign, graders } = await makeScenario()
    const candidate = await addImagedCandidate(db, campaign, 'SWS 0001')
    const grade = (uid: string, person: number, replaces: number | null) =>
      db
        .insertInto('grade')
        .values({
          uid,
          campaign_id: campaign.id,
          candidate_id: candidate,
          person_id: person,
          occasion: 'first',
          grade: 'A',
          tags: '[]',
          remark: null,
          recipe_id: null,
          view: null,
          seconds: null,
          replaces,
          given_at: '2026-01-01T00:00:00.000Z',
        })
        .returning('id')
        .executeTakeFirstOrThrow()
    const first = await grade('one', graders[0].id, null)
    await expect(grade('two', graders[0].id, null)).rejects.toThrow(/UNIQUE/)
    await expect(grade('three', graders[1].id, first.id)).rejects.toThrow(
      'a correction replaces a grade of the same person',
    )
    await grade('four', graders[0].id, first.id)
    await expect(grade('five', graders[0].id, first.id)).rejects.toThrow(/UNIQUE/)
    await db.destroy()
  })
})

describe('002, archives and batches', () => {
  it('keeps every row and reference of an installation that has delivered files, forth and back', async () => {
    const db = openDatabase(':memory:')
    const migrate = new Migrator({ db, provider: { getMigrations: async () => migrations } })
    await migrate.migrateTo('001-main-path')
    const person = "(1, 'avocet@saltmarsh.test', 'avocet', null, 1, 1, '2026', null)"
    for (const statement of [
      `insert into person values ${person}`,
      `insert into campaign (id, slug, name, survey, acronym, bands, created_by, created_at)
        values (1, 'north', 'North', 'SWS', 'SWS', '["g"]', 1, '2026')`,
      "insert into batch values (1, 1, 'Night 1', 1, '2026')",
      ...[2, 1].map(
        (id) => `insert into file values
          (${id}, 1, 1, 'SWS1_g.fits', 'fits', 'hash ${id}', 9, 'imaged', null, null, null, ${id === 1 ? 2 : 'null'}, 1, '2026', '2026')`,
      ),
      "insert into candidate (id, campaign_id, name, state_since, created_at) values (1, 1, 'SWS1', '2026', '2026')",
      "insert into plane (candidate_id, band, file_id, hdu, plane_index, width, height) values (1, 'g', 2, 0, 0, 9, 9)",
    ]) {
      await sql.raw(statement).execute(db)
    }
    const rows = async () =>
      (await sql<object>`select id, name, sha256, fate, replaced_by from file order by id`.execute(db)).rows
    const before = await rows()
    expect((await migrate.migrateTo('002-archives-and-batches')).error).toBeUndefined()
    expect(await rows()).toEqual(before)
    expect((await sql`select state from batch`.execute(db)).rows).toEqual([{ state: 'open' }])
    expect((await sql`pragma foreign_keys`.execute(db)).rows).toEqual([{ foreign_keys: 1 }])
    await expect(sql`delete from file where id = 2`.execute(db)).rejects.toThrow(/FOREIGN KEY/)
    await sql`insert into file (campaign_id, batch_id, name, kind, sha256, bytes, fate, created_by, created_at, updated_at)
      values (1, 1, 'n.zip', 'archive', 'z', 1, 'read', 1, '2026', '2026')`.execute(db)
    expect((await migrate.migrateTo('001-main-path')).error).toBeUndefined()
    expect(await rows()).toEqual(before)
    await db.destroy()
  })
})
