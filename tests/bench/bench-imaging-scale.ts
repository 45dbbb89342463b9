// Whether imaging stays linear: the cost of a candidate among ten times as many (10,000 beside 1,000, or as asked), the peer's four pictures.
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { imageFolder, SAME_FOUR, verdict, writeCutouts, type Run } from './_imaging-run'

const FEW = 1000
const WARM_UP = 240
/** A candidate may cost this much more among ten times as many: what is not linear shows far above it. */
const AIM = 1.15

async function imageMany(candidates: number): Promise<Run> {
  const cutouts = await mkdtemp(path.join(tmpdir(), 'ringside-bench-'))
  try {
    await writeCutouts(cutouts, candidates)
    return await imageFolder(cutouts, SAME_FOUR)
  } finally {
    await rm(cutouts, { recursive: true, force: true })
  }
}

/** @param few candidates of the smaller of the two. */
export async function benchImagingScale(few = FEW): Promise<string[]> {
  const sizes = [few, 10 * few]
  // Warms up the workers; twice, since the first pictures are drawn by code that is not compiled yet.
  for (let round = 0; round < 2; round++) await imageMany(WARM_UP)
  const costs: { wall: number; processor: number }[] = []
  for (const size of sizes) {
    const { seconds, processorSeconds, stamps } = await imageMany(size)
    if (stamps < size * SAME_FOUR.length) throw new Error(`Only ${stamps} stamps were made`)
    costs.push({ wall: (1000 * seconds) / size, processor: (1000 * processorSeconds) / size })
  }
  const [small, large] = costs
  const ratio = large.processor / small.processor
  return [
    `imaging of ${sizes.join(' and ')} candidates, four pictures each`,
    ...sizes.map(
      (size, k) =>
        `  ${size}: ${costs[k].wall.toFixed(2)} ms a candidate, ${costs[k].processor.toFixed(2)} ms of processor time`,
    ),
    `  a candidate among ${sizes[1]} costs ${ratio.toFixed(2)} times the processor time (aim at most ${AIM}: ${verdict(ratio <= AIM)}), ${(large.wall / small.wall).toFixed(2)} times the time`,
  ]
}
