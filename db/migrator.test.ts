import { sql } from 'kysely'
import { describe, expect, it } from 'vitest'
import { openDatabase, openMemoryDatabase } from './connection'
import { migrateToLatest, migrateToNothing } from './migrator'
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
  const GROWS_ONLY = 'rule recipe grade run verdict ruling state_change designation entry audit_event'.split(' ')

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
