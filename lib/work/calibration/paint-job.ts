import 'server-only'
import type { JobHandler } from '@/lib/platform/jobs/run-jobs'
import { blobs } from '@/lib/platform/storage/blobs'
import { imagePool } from '@/lib/work/stamps/image-pool'
import { paintStamps, type PaintStampsPayload } from './paint-stamps'

export const paintStampsJob: JobHandler = async ({ db, payload, progress }) =>
  paintStamps({ db, blobs: blobs(), runner: imagePool }, payload as PaintStampsPayload, progress)
