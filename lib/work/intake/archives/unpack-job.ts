import 'server-only'
import { config } from '@/lib/platform/config/config'
import type { JobHandler } from '@/lib/platform/jobs/run-jobs'
import { blobs } from '@/lib/platform/storage/blobs'
import { archiveLimits } from './archive-limits'
import { unpackArchives } from './unpack-archives'

/** Campaigns whose archives this process is unpacking, and whether they were asked for again meanwhile. */
const shared = globalThis as typeof globalThis & { ringsideUnpacking?: Map<number, { again: boolean }> }
shared.ringsideUnpacking ??= new Map()
const unpacking = shared.ringsideUnpacking

/** One unpacking of a campaign at a time; a second job leaves word with the first and ends. */
export const unpackArchivesJob: JobHandler = async ({ db, payload, progress }) => {
  const { campaignId } = payload as { campaignId: number }
  const running = unpacking.get(campaignId)
  if (running) {
    running.again = true
    return
  }
  const state = { again: true }
  unpacking.set(campaignId, state)
  try {
    while (state.again) {
      state.again = false
      const limits = archiveLimits(config().maxFileBytes, config().maxArchiveBytes)
      await unpackArchives({ db, blobs: blobs(), limits }, campaignId, progress)
    }
  } finally {
    unpacking.delete(campaignId)
  }
}
