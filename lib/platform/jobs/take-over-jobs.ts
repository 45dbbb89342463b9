import type { Kysely } from 'kysely'
import { freeJobsOf, listJobHolders } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import { isoTime } from '../clock'

/**
 * Jobs in the hands of processes that died are due at once, without waiting for their leases. What a living process holds stays
 * with it. Returns how many.
 */
export async function takeOverFromDead(db: Kysely<DB>, isAlive: (holder: string) => boolean): Promise<number> {
  let jobs = 0
  for (const holder of await listJobHolders(db)) {
    if (!isAlive(holder)) jobs += await freeJobsOf(db, holder, isoTime())
  }
  return jobs
}
