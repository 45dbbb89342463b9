import type { Kysely } from 'kysely'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { openMemoryDatabase } from '@/db/connection'
import { claimJob, setJobProgress } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import { log } from '../log'
import { isoTime } from '../clock'
import { enqueueJob } from './enqueue-job'
import { runDueJobs, startJobLoop } from './run-jobs'

let db: Kysely<DB>
const START = new Date('2026-05-01T00:00:00.000Z')

beforeEach(async () => {
  log.level = 'silent'
  db = await openMemoryDatabase()
  vi.useFakeTimers({ toFake: ['Date'], now: START })
})
afterEach(async () => {
  vi.useRealTimers()
  await db.destroy()
})

const states = () => db.selectFrom('job').select(['kind', 'state', 'attempts', 'error']).orderBy('id').execute()
const passSeconds = (seconds: number) => vi.setSystemTime(Date.now() + seconds * 1000)

describe('jobs', () => {
  it('run in the order in which they came, with their payload', async () => {
    const seen: unknown[] = []
    await enqueueJob(db, { kind: 'note', payload: { n: 1 } })
    await enqueueJob(db, { kind: 'note', payload: { n: 2 } })
    expect(await runDueJobs(db, { note: async ({ payload }) => void seen.push(payload) })).toBe(2)
    expect(seen).toEqual([{ n: 1 }, { n: 2 }])
    expect((await states()).map((job) => job.state)).toEqual(['done', 'done'])
  })

  it('with the same key wait once, and once more after the first has begun', async () => {
    let ran = 0
    const add = () => enqueueJob(db, { kind: 'note', uniqueKey: 'note:1' })
    expect(await add()).toBe(true)
    expect(await add()).toBe(false)
    const handler = async () => {
      ran++
      // Asked for while it runs: what it read may be old by now, so it must run again.
      if (ran === 1) expect(await add()).toBe(true)
    }
    expect(await runDueJobs(db, { note: handler })).toBe(2)
    expect(ran).toBe(2)
  })

  it('that fail wait and are tried again, five times in all, and then say why', async () => {
    await enqueueJob(db, { kind: 'note' })
    const failing = async () => {
      throw new Error('the disk is full')
    }
    expect(await runDueJobs(db, { note: failing })).toBe(1)
    expect(await states()).toMatchObject([{ state: 'queued', attempts: 1, error: 'the disk is full' }])
    expect(await runDueJobs(db, { note: failing }), 'it is not due yet').toBe(0)
    for (let tries = 0; tries < 4; tries++) {
      passSeconds(3600)
      expect(await runDueJobs(db, { note: failing })).toBe(1)
    }
    expect(await states()).toMatchObject([{ state: 'failed', attempts: 5, error: 'the disk is full' }])
    passSeconds(3600)
    expect(await runDueJobs(db, { note: failing })).toBe(0)
  })

  it('of a process that was killed are taken over when their lease runs out, and not before', async () => {
    await enqueueJob(db, { kind: 'note' })
    await db
      .updateTable('job')
      .set({ state: 'running', attempts: 1, lease_until: '2026-05-01T00:01:00.000Z' })
      .execute()
    let ran = 0
    const handlers = { note: async () => void ran++ }
    expect(await runDueJobs(db, handlers)).toBe(0)
    passSeconds(61)
    expect(await runDueJobs(db, handlers)).toBe(1)
    expect(ran).toBe(1)
    expect(await states()).toMatchObject([{ state: 'done', attempts: 2 }])
  })

  it('that take the process down five times without getting on are given up, and those that get on are not', async () => {
    await enqueueJob(db, { kind: 'note' })
    const lapse = async () => {
      passSeconds(61)
      const claim = { kinds: ['note'], now: isoTime(), leaseUntil: isoTime(60_000) }
      return (await claimJob(db, claim))!
    }
    for (let kills = 0; kills < 4; kills++) await lapse()
    const job = await lapse()
    const progress = { done: 3, total: 9, leaseUntil: isoTime(60_000), now: isoTime() }
    await setJobProgress(db, { id: job.id, leaseUntil: job.lease_until! }, progress)
    for (let kills = 0; kills < 5; kills++) await lapse()
    passSeconds(61)
    let ran = 0
    expect(await runDueJobs(db, { note: async () => void ran++ })).toBe(1)
    expect(ran).toBe(0)
    expect(await states()).toMatchObject([{ state: 'failed', error: 'The server went down each time this was tried.' }])
  })

  it('are settled only by who holds them: a holder whose lease ran out writes nothing over the next', async () => {
    await enqueueJob(db, { kind: 'note' })
    const handler = async () => {
      passSeconds(61)
      const next = await claimJob(db, { kinds: ['note'], now: isoTime(), leaseUntil: isoTime(60_000) })
      expect(next?.attempts).toBe(2)
    }
    await runDueJobs(db, { note: handler })
    expect(await states()).toMatchObject([{ state: 'running', attempts: 2 }])
  })

  it('are given back when the process stops, so that the next need not wait for the lease', async () => {
    await enqueueJob(db, { kind: 'note' })
    let finish = () => {}
    const stop = startJobLoop(db, { note: () => new Promise<void>((resolve) => (finish = resolve)) }, { idleMs: 5 })
    await vi.waitFor(async () => expect(await states()).toMatchObject([{ state: 'running' }]))
    await stop()
    expect(await states()).toMatchObject([{ state: 'queued', attempts: 0 }])
    finish()
    let ran = 0
    expect(await runDueJobs(db, { note: async () => void ran++ })).toBe(1)
    expect(ran).toBe(1)
  })

  it('of a kind that nobody here does are left alone, and do not stop the others', async () => {
    await enqueueJob(db, { kind: 'unheard-of' })
    await enqueueJob(db, { kind: 'note' })
    expect(await runDueJobs(db, { note: async () => {} })).toBe(1)
    expect(await states()).toMatchObject([{ state: 'queued', attempts: 0 }, { state: 'done' }])
  })
})
