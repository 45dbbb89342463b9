import 'server-only'
import type { Kysely } from 'kysely'
import type { Asker, QueuedCandidate } from '@/db/queries/queue'
import { countQueued, listInSpread, listOpenBuckets } from '@/db/queries/queue-walk'
import type { DB } from '@/db/schema'
import { blockAt, blocksFor, spreadRange, shuffledBy } from './shuffled-order'
import type { WalkMarks } from './walk-marks'

/** Blocks that are gone over in vain only now and then. */
const MANY = 64

/**
 * What may be lent to a person next, in the random order that is theirs. The walk begins at the block in which the last one found
 * something; past the last block it looks for what has come open since.
 */
export async function walkShuffled(
  db: Kysely<DB>,
  asker: Asker,
  { seed, limit, marks }: { seed: number; limit: number; marks: WalkMarks },
): Promise<QueuedCandidate[]> {
  const open = (await listOpenBuckets(db, asker)).reduce((sum, bucket) => sum + bucket.open, 0)
  if (open === 0) return []
  const blocks = blocksFor(await countQueued(db, asker.campaignId))
  const mark = marks(asker, `shuffled ${blocks}`)
  const begin = mark.place?.key ?? 0
  const found: QueuedCandidate[] = []
  let first: number | null = null
  for (let step = 0; step < blocks && found.length < Math.min(limit, open); step++) {
    const at = (begin + step) % blocks
    if (at === 0 && step > 0 && (found.length > 0 || blocks > MANY) && !mark.mayLookBack()) break
    const range = spreadRange(blockAt(at, blocks, seed), blocks)
    const here = shuffledBy(await listInSpread(db, asker, range), seed)
    if (here.length > 0) first ??= at
    found.push(...here)
  }
  if (first !== null) mark.place = { key: first, spread: 0 }
  return found.slice(0, limit)
}
