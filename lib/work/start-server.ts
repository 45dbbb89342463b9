import 'server-only'
import { config } from '@/lib/platform/config/config'
import { database } from '@/lib/platform/database'
import { startJobLoop } from '@/lib/platform/jobs/run-jobs'
import { log } from '@/lib/platform/log'
import { jobHandlers } from './job-handlers'

const shared = globalThis as typeof globalThis & { ringsideStarted?: boolean }

/** Opens and migrates the database, then works through the jobs for as long as the process lives. */
export async function startServer(): Promise<void> {
  if (shared.ringsideStarted) return
  shared.ringsideStarted = true
  // next-auth reads its address from the environment only.
  process.env.NEXTAUTH_URL ??= config().siteUrl
  const db = await database()
  startJobLoop(db, jobHandlers)
  log.info({ data: config().dataFolder, site: config().siteUrl }, 'ringside started')
}
