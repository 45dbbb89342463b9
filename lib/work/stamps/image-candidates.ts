import 'server-only'
import { listHeldPlanes } from '@/db/queries/cutouts'
import { listCandidatesById, listCandidatesToImage } from '@/db/queries/stamps'
import { groupBy } from '@/lib/work/intake/read-manifest'
import { campaignWork, type ImagingTools } from './campaign-work'
import type { ImageCandidatesPayload } from './commit-outcomes'
import { heldPlane } from './plan-imaging'
import { runImaging, type ToImage } from './run-imaging'

const CANDIDATES_PER_PAGE = 1000
/** Of an 80 by 80 pixel cutout in floats; only to share the work out. */
const USUAL_PLANE_BYTES = 28_800

/**
 * Draws stamps anew from planes that were read before: of named candidates, or of all that have none by the recipe in force.
 * What is done is seen in the stamp rows, so after a kill it goes on where it was.
 */
export async function imageCandidates(
  tools: ImagingTools,
  { campaignId, candidateIds }: ImageCandidatesPayload,
  progress: (done: number, total: number) => Promise<void>,
): Promise<void> {
  const { db } = tools
  const work = await campaignWork(db, campaignId)
  let done = 0
  for (let afterId = 0; ;) {
    const candidates = candidateIds
      ? await listCandidatesById(db, campaignId, candidateIds)
      : await listCandidatesToImage(db, campaignId, work.recipeId, afterId, CANDIDATES_PER_PAGE)
    const last = candidates.at(-1)
    if (!last) return
    afterId = last.id
    const names = candidates.map(({ name }) => name)
    const held = groupBy(await listHeldPlanes(db, campaignId, names), ({ candidate }) => candidate)
    const planned: ToImage[] = [...held].map(([name, rows]) => ({
      bytes: rows.length * USUAL_PLANE_BYTES,
      candidate: { name, files: [], held: rows.map((row) => heldPlane(tools, row)), manifestPosition: null },
    }))
    await runImaging(tools, work, planned, async () => {}, true)
    done += candidates.length
    await progress(done, done)
    if (candidateIds) return
  }
}
