// Whether imaging stays linear: the cost of a candidate among 10,000 beside that among 1,000, the peer's four pictures.
import { mkdtemp, rm } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { imageFolder, SAME_FOUR, verdict, writeCutouts, type Run } from './_imaging-run'

const SIZES = [1000, 10_000]
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

export async function benchImagingScale(): Promise<string[]> {
  // Warms up the workers.
  await imageMany(240)
  const costs: { wall: number; processor: number }[] = []
  for (const size of SIZES) {
    const { seconds, processorSeconds, stamps } = await imageMany(size)
    if (stamps < size * SAME_FOUR.length) throw new Error(`Only ${stamps} stamps were made`)
    costs.push({ wall: (1000 * seconds) / size, processor: (1000 * processorSeconds) / size })
  }
  const [few, many] = costs
  const ratio = many.processor / few.processor
  return [
    `imaging of ${SIZES.join(' and ')} candidates, four pictures each`,
    ...SIZES.map(
      (size, k) =>
        `  ${size}: ${costs[k].wall.toFixed(2)} ms a candidate, ${costs[k].processor.toFixed(2)} ms of processor time`,
    ),
    `  a candidate among ${SIZES[1]} costs ${ratio.toFixed(2)} times the processor time (aim at most ${AIM}: ${verdict(ratio <= AIM)}), ${(many.wall / few.wall).toFixed(2)} times the time`,
  ]
}
