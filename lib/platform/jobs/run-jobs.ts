import type { Kysely } from 'kysely'
import { claimJob, setJobDone, setJobProgress, setJobRetry } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import type { Job } from '@/db/schema/platform'
import { fromJson } from '@/db/schema/values'
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

async function runOne(db: Kysely<DB>, job: Job, handlers: JobHandlers): Promise<void> {
  const handler = handlers[job.kind]
  try {
    if (!handler) throw new Error(`No handler for jobs of kind ${job.kind}`)
    let { done, total } = job
    const progress = async (nextDone: number, nextTotal: number) => {
      done = nextDone
      total = nextTotal
      await setJobProgress(db, job.id, { done, total, leaseUntil: isoTime(LEASE_MS), now: isoTime() })
    }
    const heartbeat = setInterval(() => void progress(done, total).catch(() => {}), LEASE_MS / 4)
    try {
      await handler({ db, payload: fromJson(job.payload), progress })
    } finally {
      clearInterval(heartbeat)
    }
    await setJobDone(db, job.id, isoTime())
  } catch (error) {
    const sentence = error instanceof Error ? error.message : String(error)
    const again = job.attempts < MAX_ATTEMPTS
    log.error({ job: job.id, kind: job.kind, attempt: job.attempts, again, err: error }, 'job failed')
    const runAfter = again ? isoTime(FIRST_RETRY_MS * 4 ** (job.attempts - 1)) : null
    await setJobRetry(db, job.id, { error: sentence, runAfter, now: isoTime() })
  }
}

/** Runs jobs that are due, one after the other, until none is (or it should stop). Returns how many it ran. */
export async function runDueJobs(db: Kysely<DB>, handlers: JobHandlers, shouldStop = () => false): Promise<number> {
  for (let ran = 0; ; ran++) {
    if (shouldStop()) return ran
    const job = await claimJob(db, isoTime(), isoTime(LEASE_MS))
    if (!job) return ran
    await runOne(db, job, handlers)
  }
}

/**
 * Looks for due jobs for as long as the process lives. Three loops let a quick consensus pass a long imaging job and a
 * long unpacking. Returns a
 * function that stops it after the jobs in hand.
 */
export function startJobLoop(db: Kysely<DB>, handlers: JobHandlers, idleMs = 400, loops = 3): () => Promise<void> {
  let stopped = false
  const loop = async () => {
    while (!stopped) {
      const ran = await runDueJobs(db, handlers, () => stopped).catch((error: unknown) => {
        log.error({ err: error }, 'job loop')
        return 0
      })
      if (!stopped && ran === 0) await new Promise((resolve) => setTimeout(resolve, idleMs))
    }
  }
  const running = Array.from({ length: loops }, loop)
  return async () => {
    stopped = true
    await Promise.all(running)
  }
}
