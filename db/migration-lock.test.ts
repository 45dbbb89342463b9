import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { setTimeout } from 'node:timers/promises'
import { sql } from 'kysely'
import { afterEach, beforeEach, expect, it } from 'vitest'
import { openDatabase } from './connection'
import { whileLocked } from './migration-lock'
import { migrateToLatest } from './migrator'

let folder: string
beforeEach(async () => void (folder = await mkdtemp(path.join(tmpdir(), 'ringside-lock-'))))
afterEach(() => rm(folder, { recursive: true, force: true }))

it('a second server waits with its migrations until the first has done them', async () => {
  const file = path.join(folder, 'ringside.sqlite')
  const db = openDatabase(file)
  const tables = async () =>
    (await sql<{ n: number }>`select count(*) as n from sqlite_master where type = 'table'`.execute(db)).rows[0].n
  let release = () => {}
  const first = whileLocked(file, () => new Promise<void>((resolve) => (release = resolve)))
  const second = migrateToLatest(db)
  await setTimeout(150)
  expect(await tables()).toBe(0)
  release()
  await first
  expect((await second).length).toBeGreaterThan(5)
  expect(await tables()).toBeGreaterThan(20)
  await db.destroy()
})

it('a migration that failed holds up nobody', async () => {
  const file = path.join(folder, 'ringside.sqlite')
  await expect(whileLocked(file, () => Promise.reject(new Error('no room')))).rejects.toThrow('no room')
  expect(await whileLocked(file, async () => 'done')).toBe('done')
})
