import 'server-only'
import path from 'node:path'
import { config } from '@/lib/platform/config/config'
import { database } from '@/lib/platform/database'
import { startJobLoop } from '@/lib/platform/jobs/run-jobs'
import { isAlive, showLife } from '@/lib/platform/jobs/sign-of-life'
import { takeOverFromDead } from '@/lib/platform/jobs/take-over-jobs'
import { log } from '@/lib/platform/log'
import { blobs } from '@/lib/platform/storage/blobs'
import { jobLoops } from './job-handlers'
import { makeSetupCode } from './people/setup-code'
import { raiseRecipes } from './stamps/raise-recipes'

const shared = globalThis as typeof globalThis & { ringsideStarted?: boolean }

/** A delivery that has not grown for so long is one that a kill cut off. */
const DAY_MS = 86_400_000

/** Opens and migrates the database, then works through the jobs for as long as the process lives. */
export async function startServer(): Promise<void> {
  if (shared.ringsideStarted) return
  shared.ringsideStarted = true
  // next-auth reads its address from the environment only.
  if (!process.env.NEXTAUTH_URL?.trim()) process.env.NEXTAUTH_URL = config().siteUrl
  const db = await database()
  const code = await makeSetupCode(db)
  // Plain, not through the log: a person looks for it, at every level of the log.
  if (code) console.log(`First visit: open ${config().siteUrl}/welcome and enter the one-time code ${code}`)
  const swept = await blobs().sweepTemporary(new Date(Date.now() - DAY_MS))
  if (swept > 0) log.info({ swept }, 'half-written deliveries removed')
  const raised = await raiseRecipes(db)
  if (raised > 0) log.info({ campaigns: raised }, 'pictures are drawn otherwise now, and are made again')
  const signs = path.join(config().dataFolder, 'processes')
  const { id: holder, end } = showLife(signs)
  const freed = await takeOverFromDead(db, (other) => isAlive(signs, other))
  if (freed > 0) log.info({ freed }, 'jobs of processes that died taken over')
  const loops = jobLoops.map((handlers) => startJobLoop(db, handlers, { holder }))
  process.once('SIGTERM', () => void Promise.all(loops.map((stop) => stop())).then(end))
  log.info({ data: config().dataFolder, site: config().siteUrl }, 'ringside started')
}
