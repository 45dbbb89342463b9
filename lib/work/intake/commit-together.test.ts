import { mkdtemp, open, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { Kysely } from 'kysely'
import { openDatabase, openMemoryDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import type { DB } from '@/db/schema'
import { commitTogether } from './commit-together'

let db: Kysely<DB>
beforeEach(async () => void (db = await openMemoryDatabase()))
afterEach(() => db.destroy())

const add = (key: string) => async (transaction: Kysely<DB>) => {
  await transaction.insertInto('site').values({ key, value: '' }).execute()
  return key
}
const keys = async () => (await db.selectFrom('site').select('key').orderBy('key').execute()).map(({ key }) => key)

describe('work of several requests', () => {
  it('that comes together is committed together, and each has its own answer', async () => {
    const inside: number[] = []
    const counted = (key: string) => async (transaction: Kysely<DB>) => {
      const made = await add(key)(transaction)
      inside.push((await transaction.selectFrom('site').selectAll().execute()).length)
      return made
    }
    const before = (await keys()).length
    expect(await Promise.all([commitTogether(db, counted('a')), commitTogether(db, counted('b'))])).toEqual(['a', 'b'])
    expect(inside).toEqual([before + 1, before + 2])
    expect(await keys()).toEqual(expect.arrayContaining(['a', 'b']))
  })

  it('is done although another of them fails, of which nothing is kept', async () => {
    const fails = async (transaction: Kysely<DB>) => {
      await add('half')(transaction)
      throw new Error('no room')
    }
    const answers = await Promise.allSettled([
      commitTogether(db, add('a')),
      commitTogether(db, fails),
      commitTogether(db, add('b')),
    ])
    expect(answers.map(({ status }) => status)).toEqual(['fulfilled', 'rejected', 'fulfilled'])
    expect(answers[1]).toMatchObject({ reason: new Error('no room') })
    expect(await keys()).toEqual(expect.arrayContaining(['a', 'b']))
    expect(await keys()).not.toContain('half')
  })

  it('goes on after any number', async () => {
    const wanted = Array.from({ length: 30 }, (_, index) => `k${index}`)
    expect(await Promise.all(wanted.map((key) => commitTogether(db, add(key))))).toEqual(wanted)
    expect(await commitTogether(db, add('last'))).toBe('last')
    expect(await keys()).toEqual(expect.arrayContaining([...wanted, 'last']))
  })
})

describe('the answer to work that was committed without waiting for the disk', () => {
  let folder: string
  beforeEach(async () => {
    await db.destroy()
    folder = await mkdtemp(path.join(tmpdir(), 'ringside-together-'))
    db = openDatabase(path.join(folder, 'ringside.sqlite'))
    await migrateToLatest(db)
  })
  afterEach(async () => {
    vi.restoreAllMocks()
    await rm(folder, { recursive: true, force: true })
  })

  const spySync = async () => {
    const handle = await open(folder, 'r')
    const sync = vi.spyOn(Object.getPrototypeOf(handle) as typeof handle, 'sync')
    await handle.close()
    return sync
  }

  it('comes when it is on disk, not before', async () => {
    let reached = () => {}
    let release = () => {}
    const syncing = new Promise<void>((resolve) => (reached = resolve))
    const disk = new Promise<void>((resolve) => (release = resolve))
    const sync = await spySync()
    sync.mockImplementation(() => (reached(), disk))
    let answered = false
    const answer = commitTogether(db, add('a')).then((key) => ((answered = true), key))
    await syncing
    expect(await keys()).toContain('a')
    expect(answered).toBe(false)
    release()
    expect(await answer).toBe('a')
  })

  it('is an error where the disk refuses', async () => {
    const sync = await spySync()
    sync.mockRejectedValue(new Error('no disk'))
    await expect(commitTogether(db, add('a'))).rejects.toThrow('no disk')
  })
})
