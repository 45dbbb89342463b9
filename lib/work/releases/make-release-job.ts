import 'server-only'
import { z } from 'zod'
import { config } from '@/lib/platform/config/config'
import type { JobHandler } from '@/lib/platform/jobs/run-jobs'
import { blobs } from '@/lib/platform/storage/blobs'
import { stampFolder } from '@/lib/work/stamps/imaging-tools'
import { makeRelease } from './make-release'

const Payload = z.object({ releaseId: z.number() })

export const makeReleaseJob: JobHandler = async ({ db, payload, progress }) => {
  const { releaseId } = Payload.parse(payload)
  const tools = { db, blobs: blobs(), stampFolder: stampFolder(), siteUrl: config().siteUrl }
  await makeRelease(tools, releaseId, progress)
}
