import 'server-only'
import type { JobHandler } from '@/lib/platform/jobs/run-jobs'
import type { ReadFilesPayload } from '@/lib/work/intake/request-reading'
import { tryUnmatchedAgain } from '@/lib/work/intake/try-again'
import type { ImageCandidatesPayload } from './commit-outcomes'
import { imageCandidates } from './image-candidates'
import { imagingTools } from './imaging-tools'
import { readFiles } from './read-files'

/** Campaigns whose files this process is reading, and whether they were asked for again meanwhile. */
const shared = globalThis as typeof globalThis & { ringsideReading?: Map<number, { again: boolean }> }
shared.ringsideReading ??= new Map()
const reading = shared.ringsideReading

/**
 * One reading of a campaign at a time: a second job leaves word with the first and ends, so that it keeps no loop from other
 * work. Were the first killed, its lease would run out and it would start again.
 */
export const readFilesJob: JobHandler = async ({ db, payload, progress }) => {
  const { campaignId, unmatchedAgain } = payload as ReadFilesPayload
  if (unmatchedAgain) await tryUnmatchedAgain(db, campaignId)
  const running = reading.get(campaignId)
  if (running) {
    running.again = true
    return
  }
  const state = { again: true }
  reading.set(campaignId, state)
  try {
    while (state.again) {
      state.again = false
      await readFiles(imagingTools(db), campaignId, progress)
    }
  } finally {
    reading.delete(campaignId)
  }
}

export const imageCandidatesJob: JobHandler = async ({ db, payload, progress }) =>
  imageCandidates(imagingTools(db), payload as ImageCandidatesPayload, progress)
