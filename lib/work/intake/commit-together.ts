import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { syncCommits, unsynced } from '@/db/unsynced'
import { giveWay } from '@/lib/platform/jobs/give-way'

type Work<T> = (transaction: Kysely<DB>) => Promise<T>

interface Waiting {
  work: Work<unknown>
  done: (result: unknown) => void
  failed: (error: unknown) => void
}

/** So long the first waits for others. Files come at 5 to 20 ms from each other while several are sent at once. */
const GATHER_MS = 4
/** More would keep pages waiting. */
const MOST_TOGETHER = 8

const queues = new WeakMap<Kysely<DB>, Waiting[]>()

/**
 * Does the work of several requests that come at the same time in one transaction, and has it synced to disk in a thread beside,
 * since the sync would block the process for longer than all else. Each is answered when it is on disk. If one fails, all are
 * done again, each alone, so `work` must do nothing but write to the database.
 */
export function commitTogether<T>(db: Kysely<DB>, work: Work<T>): Promise<T> {
  return new Promise<T>((resolve, reject) => {
    const waiting = { work, done: (result: unknown) => resolve(result as T), failed: reject }
    const queue = queues.get(db)
    if (queue) return void queue.push(waiting)
    const fresh: Waiting[] = [waiting]
    queues.set(db, fresh)
    setTimeout(() => void drain(db, fresh), GATHER_MS)
  })
}

async function drain(db: Kysely<DB>, queue: Waiting[]): Promise<void> {
  while (queue.length > 0) {
    await commit(db, queue.splice(0, MOST_TOGETHER))
    // Others have their turn between two commits.
    await giveWay()
  }
  queues.delete(db)
}

async function commit(db: Kysely<DB>, together: Waiting[]): Promise<void> {
  try {
    const results = await unsynced(db, (connection) =>
      connection.transaction().execute(async (transaction) => {
        const made: unknown[] = []
        for (const { work } of together) made.push(await work(transaction))
        return made
      }),
    )
    void acknowledge(db, together, results)
  } catch (error) {
    if (together.length === 1) return together[0].failed(error)
    for (const one of together) await commit(db, [one])
  }
}

async function acknowledge(db: Kysely<DB>, together: Waiting[], results: unknown[]): Promise<void> {
  try {
    await syncCommits(db)
    together.forEach(({ done }, index) => done(results[index]))
  } catch (error) {
    for (const { failed } of together) failed(error)
  }
}
