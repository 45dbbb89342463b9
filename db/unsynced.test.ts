import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { sql } from 'kysely'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { syncFolder } from '@/lib/platform/storage/sync-folder'
import { openDatabase, openMemoryDatabase } from './connection'
import { migrateToLatest } from './migrator'
import { syncCommits, unsynced } from './unsynced'

vi.mock(import('@/lib/platform/storage/sync-folder'), { spy: true })

let folder: string
beforeEach(async () => void (folder = await mkdtemp(path.join(tmpdir(), 'ringside-unsynced-'))))
afterEach(() => rm(folder, { recursive: true, force: true }))

const FULL = 2
const NORMAL = 1

describe('a commit that does not wait for the disk', () => {
  it('leaves the connection as it was, also where the work fails', async () => {
    const db = await openMemoryDatabase()
    const level = async (on = db) => (await sql<{ synchronous: number }>`pragma synchronous`.execute(on)).rows[0]
    expect(await level()).toEqual({ synchronous: FULL })
    expect(await unsynced(db, level)).toEqual({ synchronous: NORMAL })
    expect(await level()).toEqual({ synchronous: FULL })
    const failing = unsynced(db, () => Promise.reject(new Error('no room')))
    await expect(failing).rejects.toThrow('no room')
    expect(await level()).toEqual({ synchronous: FULL })
    await syncCommits(db)
    await db.destroy()
  })

  it('is there after the process was killed right behind it', async () => {
    const file = path.join(folder, 'ringside.sqlite')
    const first = openDatabase(file)
    await migrateToLatest(first)
    await first.destroy()
    const modules = ['connection', 'unsynced'].map((name) => JSON.stringify(path.resolve(`db/${name}.ts`)))
    const script = `import { openDatabase } from ${modules[0]}
      import { syncCommits, unsynced } from ${modules[1]}
      const db = openDatabase(${JSON.stringify(file)})
      const add = (key) => unsynced(db, (c) => c.insertInto('site').values({ key, value: '' }).execute())
      await add('one')
      await syncCommits(db)
      await add('two')
      process.kill(process.pid, 'SIGKILL')`
    const args = ['--conditions=react-server', '--import', 'tsx', '--input-type=module', '-e', script]
    const child = spawn(process.execPath, args, { stdio: 'inherit' })
    const [code, signal] = (await once(child, 'exit')) as [number | null, string | null]
    expect({ code, signal }).toEqual({ code: null, signal: 'SIGKILL' })
    const again = openDatabase(file)
    const keys = await again
      .selectFrom('site')
      .select('key')
      .where('key', 'in', ['one', 'two'])
      .orderBy('key')
      .execute()
    expect(keys.map(({ key }) => key)).toEqual(['one', 'two'])
    await again.destroy()
  })

  it('has its log brought to disk by name too, once a connection', async () => {
    const db = openDatabase(path.join(folder, 'ringside.sqlite'))
    await migrateToLatest(db)
    vi.mocked(syncFolder).mockClear()
    vi.mocked(syncFolder).mockRejectedValueOnce(new Error('no disk'))
    await expect(syncCommits(db)).rejects.toThrow('no disk')
    await syncCommits(db)
    await syncCommits(db)
    expect(vi.mocked(syncFolder).mock.calls).toEqual([[folder], [folder]])
    await db.destroy()
  })
})
