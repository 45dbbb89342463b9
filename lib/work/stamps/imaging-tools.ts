import 'server-only'
import type { Kysely } from 'kysely'
import path from 'node:path'
import type { DB } from '@/db/schema'
import { config } from '@/lib/platform/config/config'
import { blobs } from '@/lib/platform/storage/blobs'
import type { ImagingTools } from './campaign-work'
import { imagePool, workerCount } from './image-pool'

/** Bands of one candidate come one after the other; when nothing has come for this long, the delivery is taken to be over. */
const QUIET_MS = 2500

export const stampFolder = (): string => path.join(config().dataFolder, 'stamps')

export function imagingTools(db: Kysely<DB>): ImagingTools {
  return {
    db,
    blobs: blobs(),
    stampFolder: stampFolder(),
    runner: imagePool,
    workers: workerCount(),
    quietMs: QUIET_MS,
  }
}
