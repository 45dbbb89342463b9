import 'server-only'
import { log } from '@/lib/platform/log'
import type { ManifestFacts } from '@/lib/work/intake/manifest-facts'
import type { CampaignWork, ImagingTools } from './campaign-work'
import { commitOutcomes } from './commit-outcomes'
import { inLanes } from './in-lanes'
import { plannedPlanes, type CandidateOutcome, type CandidateToImage } from './worker-tasks'

/**
 * So many candidates a task, a transaction and a file of stamps: of fewer each pays more for the pages that every commit writes anew,
 * of more the main thread is held up longer than a page request should wait. A task holds at most 32 MiB of files, so that large cutouts do not fill the memory.
 */
const MOST_CANDIDATES = 32
const MOST_BYTES = 32 * 1024 * 1024

export interface ToImage {
  candidate: CandidateToImage
  bytes: number
  facts?: ManifestFacts
}

/** Splits work so that every thread has some, also when there is little of it. */
export function tasksOf(work: readonly ToImage[], workers: number): ToImage[][] {
  const most = Math.max(1, Math.min(MOST_CANDIDATES, Math.ceil(work.length / (2 * workers))))
  const tasks: ToImage[][] = []
  let bytes = 0
  for (const item of work) {
    const task = tasks.at(-1)
    if (!task || task.length >= most || bytes + item.bytes > MOST_BYTES) {
      tasks.push([item])
      bytes = item.bytes
    } else {
      task.push(item)
      bytes += item.bytes
    }
  }
  return tasks
}

/** Images candidates on all threads and commits each task as it comes back. `onCommitted` hears how many files were settled and candidates done. */
export async function runImaging(
  tools: ImagingTools,
  work: CampaignWork,
  candidates: readonly ToImage[],
  onCommitted: (files: number, candidates: number) => Promise<void>,
  keepPositions = false,
): Promise<void> {
  // One lane more than threads, so that no thread waits for a commit.
  await inLanes(tools.workers + 1, tasksOf(candidates, tools.workers), async (task) => {
    const outcomes = await imageTask(tools, work, task)
    for (const { name, imagingFault } of outcomes) {
      if (imagingFault) log.warn({ candidate: name, imagingFault }, 'candidate not imaged')
    }
    const facts = new Map(task.map((item) => [item.candidate.name, item.facts]))
    const kept = keepPositions ? outcomes.map((one) => ({ ...one, position: null, pixelScaleArcsec: null })) : outcomes
    await commitOutcomes(tools.db, work, kept, (name) => facts.get(name))
    const files = task.reduce((sum, { candidate }) => sum + candidate.files.length, 0)
    await onCommitted(files, task.length)
  })
}

async function imageTask(
  tools: ImagingTools,
  work: CampaignWork,
  task: readonly ToImage[],
): Promise<CandidateOutcome[]> {
  const candidates = task.map(({ candidate }) => candidate)
  const { bands, recipe } = work
  try {
    return await tools.runner.image({ bands, recipe, stampFolder: tools.stampFolder, candidates })
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code ?? ''
    // A full or broken disk is no fault of the files. The job is tried again.
    if (/^E[A-Z]+$/.test(code)) throw error
    if (task.length > 1) {
      const alone: CandidateOutcome[] = []
      for (const item of task) alone.push(...(await imageTask(tools, work, [item])))
      return alone
    }
    log.error({ err: error, candidate: candidates[0].name }, 'reading a candidate failed')
    return [readerFailed(candidates[0], error)]
  }
}

/** One candidate that brings the reader down is refused by itself, so that it does not stand in the way of all others. */
function readerFailed(candidate: CandidateToImage, error: unknown): CandidateOutcome {
  const why = error instanceof Error ? error.message : String(error)
  const reason = `Reading it failed inside Ringside (${why}). The file is kept; tell an administrator.`
  return {
    name: candidate.name,
    planned: plannedPlanes(candidate),
    files: candidate.files.map(({ id }) => ({
      id,
      fate: 'refused',
      fault: 'reader-failed',
      reason,
      duplicateOf: null,
    })),
    planes: [],
    position: null,
    pixelScaleArcsec: null,
    stamps: null,
    imagingFault: null,
  }
}
