import { spawn } from 'node:child_process'
import { once } from 'node:events'
import { mkdtemp, readdir, rm, utimes } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import type { Kysely } from 'kysely'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { openMemoryDatabase } from '@/db/connection'
import { claimJob, setJobDone } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import { isoTime } from '../clock'
import { enqueueJob } from './enqueue-job'
import { runDueJobs } from './run-jobs'
import { isAlive, showLife } from './sign-of-life'
import { takeOverFromDead } from './take-over-jobs'

let db: Kysely<DB>
let folder: string
const children: ReturnType<typeof spawn>[] = []
beforeEach(async () => {
  db = await openMemoryDatabase()
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-signs-'))
})
afterEach(async () => {
  for (const child of children.splice(0)) child.kill('SIGKILL')
  await db.destroy()
  await rm(folder, { recursive: true, force: true })
})

/** A process of its own that shows its sign of life and does nothing else. */
async function otherProcess(): Promise<{ id: string; kill(): Promise<void> }> {
  const sign = path.resolve('lib/platform/jobs/sign-of-life.ts')
  const script = `import { showLife } from ${JSON.stringify(sign)}
    const sign = showLife(${JSON.stringify(folder)})
    process.stdout.write(sign.id)
    setInterval(() => sign, 1000)`
  const args = ['--import', 'tsx', '--input-type=module', '-e', script]
  const child = spawn(process.execPath, args, { stdio: ['ignore', 'pipe', 'inherit'] })
  children.push(child)
  const [id] = (await once(child.stdout!, 'data')) as [Buffer]
  return {
    id: id.toString(),
    async kill() {
      const ended = once(child, 'exit')
      child.kill('SIGKILL')
      await ended
    },
  }
}

async function heldBy(holder: string) {
  await enqueueJob(db, { kind: 'note' })
  const claim = { kinds: ['note'], now: isoTime(), leaseUntil: isoTime(60_000), holder }
  const { id, lease_until } = (await claimJob(db, claim))!
  return { id, leaseUntil: lease_until! }
}

const takeOver = () => takeOverFromDead(db, (holder) => isAlive(folder, holder))

describe('jobs in the hands of another process', () => {
  it('are left to it while it lives, and taken at once when it was killed', async () => {
    const other = await otherProcess()
    const claim = await heldBy(other.id)
    let ran = 0
    const handlers = { note: async () => void ran++ }
    expect(await takeOver()).toBe(0)
    expect(await runDueJobs(db, handlers)).toBe(0)
    await other.kill()
    expect(await takeOver()).toBe(1)
    expect(await runDueJobs(db, handlers)).toBe(1)
    expect(ran).toBe(1)
    // Were it not dead but only unseen, it could write nothing any more.
    await db
      .updateTable('job')
      .set({ state: 'running', lease_until: isoTime(90_000) })
      .execute()
    await setJobDone(db, claim, isoTime())
    expect(await db.selectFrom('job').select('state').execute()).toEqual([{ state: 'running' }])
  })

  it('keep the count of their attempts, so that one that takes every process down is given up', async () => {
    await enqueueJob(db, { kind: 'note' })
    for (let kills = 0; kills < 5; kills++) {
      const gone = showLife(folder)
      await claimJob(db, { kinds: ['note'], now: isoTime(), leaseUntil: isoTime(60_000), holder: gone.id })
      gone.end()
      expect(await takeOver()).toBe(1)
    }
    let ran = 0
    expect(await runDueJobs(db, { note: async () => void ran++ })).toBe(1)
    expect(ran).toBe(0)
    expect(await db.selectFrom('job').select('state').execute()).toEqual([{ state: 'failed' }])
  })

  it('whose holder gave no name wait for their lease', async () => {
    await enqueueJob(db, { kind: 'note' })
    await claimJob(db, { kinds: ['note'], now: isoTime(), leaseUntil: isoTime(60_000) })
    expect(await takeOver()).toBe(0)
  })
})

describe('a sign of life', () => {
  it('is seen within the same process, and gone when it ends', () => {
    const sign = showLife(folder)
    expect(isAlive(folder, sign.id)).toBe(true)
    // Looking does not take the lock away.
    expect(isAlive(folder, sign.id)).toBe(true)
    sign.end()
    expect(isAlive(folder, sign.id)).toBe(false)
  })

  it('of a dead process is removed after a day, that of a living one never', async () => {
    const [dead, living] = [await otherProcess(), await otherProcess()]
    await dead.kill()
    const longAgo = new Date(Date.now() - 2 * 86_400_000)
    for (const { id } of [dead, living]) await utimes(path.join(folder, id), longAgo, longAgo)
    const own = showLife(folder)
    expect((await readdir(folder)).toSorted()).toEqual([living.id, own.id].toSorted())
    own.end()
  })
})
