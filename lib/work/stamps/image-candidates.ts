import 'server-only'
import { requireRecipe } from '@/db/queries/campaigns'
import { listHeldPlanes } from '@/db/queries/cutouts'
import { countImagedBy } from '@/db/queries/recipes'
import { listCandidatesById, listCandidatesToImage } from '@/db/queries/stamps'
import { groupBy } from '@/lib/work/intake/group-by'
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
  { campaignId, candidateIds, recipeId }: ImageCandidatesPayload,
  progress: (done: number, total: number) => Promise<void>,
): Promise<void> {
  const { db } = tools
  const work = await campaignWork(db, campaignId, recipeId)
  let done = 0
  const { candidates: all, imaged } = await countImagedBy(db, campaignId, work.recipeId)
  const total = candidateIds?.length ?? all - imaged
  await progress(0, total)
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
    const tell = async (_files: number, committed: number) => {
      done += committed
      await progress(done, Math.max(done, total))
    }
    await runImaging(tools, work, planned, tell, true)
    if (candidateIds) return
    // A change of the recipe has asked for a job of its own, which makes all pictures by it.
    if ((await requireRecipe(db, campaignId)).id !== work.recipeId) return
  }
}
