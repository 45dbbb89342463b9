import type { Kysely } from 'kysely'
import { claimJob, giveBackJob, setJobDone, setJobProgress, setJobRetry, type Claim } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import type { Job } from '@/db/schema/platform'
import { fromJson } from '@/db/schema/values'
import { unsynced } from '@/db/unsynced'
import { isoTime } from '../clock'
import { log } from '../log'

/** A handler must be idempotent: after a kill it runs again from the start. `progress` also renews the lease. */
export type JobHandler = (context: {
  db: Kysely<DB>
  payload: unknown
  progress: (done: number, total: number) => Promise<void>
}) => Promise<void>

export type JobHandlers = Readonly<Record<string, JobHandler>>

/** A holder that has said nothing for this long is taken for dead. */
const LEASE_MS = 60_000
const MAX_ATTEMPTS = 5
const FIRST_RETRY_MS = 2_000

interface Held {
  kind: string
  claim: Claim
}

/** What this process has in hand, to be given back when it is stopped. */
const inHand = new Set<Held>()

async function runOne(db: Kysely<DB>, job: Job, handler: JobHandler): Promise<void> {
  const held: Held = { kind: job.kind, claim: { id: job.id, leaseUntil: job.lease_until! } }
  inHand.add(held)
  try {
    if (job.attempts > MAX_ATTEMPTS) throw new Error(job.error ?? 'The server went down each time this was tried.')
    let { done, total } = job
    const progress = async (nextDone: number, nextTotal: number) => {
      done = nextDone
      total = nextTotal
      const leaseUntil = isoTime(LEASE_MS)
      const told = { done, total, leaseUntil, now: isoTime() }
      if (await unsynced(db, (connection) => setJobProgress(connection, held.claim, told))) {
        held.claim = { id: job.id, leaseUntil }
      }
    }
    const heartbeat = setInterval(() => void progress(done, total).catch(() => {}), LEASE_MS / 4)
    try {
      await handler({ db, payload: fromJson(job.payload), progress })
    } finally {
      clearInterval(heartbeat)
    }
    await unsynced(db, (connection) => setJobDone(connection, held.claim, isoTime()))
  } catch (error) {
    const sentence = error instanceof Error ? error.message : String(error)
    const { attempts } = job
    const again = attempts < MAX_ATTEMPTS
    log.error({ job: job.id, kind: job.kind, attempts, again, err: error }, 'job failed')
    const runAfter = again ? isoTime(FIRST_RETRY_MS * 4 ** (attempts - 1)) : null
    await setJobRetry(db, held.claim, { attempts, error: sentence, runAfter, now: isoTime() })
  } finally {
    inHand.delete(held)
  }
}

interface LoopOptions {
  /** The name of this process's sign of life, so that another can tell that it died. */
  holder?: string | null
  idleMs?: number
}

/** Runs due jobs of the kinds that have a handler, one after the other, until none is (or it should stop). Returns how many. */
export async function runDueJobs(
  db: Kysely<DB>,
  handlers: JobHandlers,
  { holder = null, shouldStop = () => false }: Pick<LoopOptions, 'holder'> & { shouldStop?: () => boolean } = {},
): Promise<number> {
  const kinds = Object.keys(handlers)
  for (let ran = 0; ; ran++) {
    if (shouldStop()) return ran
    const claim = { kinds, now: isoTime(), leaseUntil: isoTime(LEASE_MS), holder }
    const job = await unsynced(db, (connection) => claimJob(connection, claim))
    if (!job) return ran
    await runOne(db, job, handlers[job.kind])
  }
}

/**
 * Looks for due jobs of these kinds for as long as the process lives. Each loop works on one job at a time, so kinds that must
 * not wait for long ones get a loop of their own. Returns a function that gives back what is in hand, so that the next process
 * need not wait for the leases to run out.
 */
export function startJobLoop(
  db: Kysely<DB>,
  handlers: JobHandlers,
  { holder = null, idleMs = 400 }: LoopOptions = {},
): () => Promise<void> {
  let stopped = false
  const loop = async () => {
    while (!stopped) {
      const ran = await runDueJobs(db, handlers, { holder, shouldStop: () => stopped }).catch((error: unknown) => {
        log.error({ err: error }, 'job loop')
        return 0
      })
      if (!stopped && ran === 0) await new Promise((resolve) => setTimeout(resolve, idleMs))
    }
  }
  void loop()
  return async () => {
    stopped = true
    const own = [...inHand].filter(({ kind }) => kind in handlers)
    await Promise.all(own.map(({ claim }) => giveBackJob(db, claim, isoTime())))
  }
}
