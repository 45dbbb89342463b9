import 'server-only'
import type { Kysely } from 'kysely'
import type { Asker } from '@/db/queries/queue'
import { listOpenBuckets, walkBucket, type Bucket, type WalkedCandidate, type WalkOrder } from '@/db/queries/queue-walk'
import type { DB } from '@/db/schema'
import type { WalkMark, WalkMarks } from './walk-marks'

/**
 * What may be lent to a person next, in the order asked for. Counters tell which buckets hold nothing that the person has not
 * graded: those are passed by. Within a bucket the walk begins where the last one found something, so that what the person has
 * graded is not gone over each time. What has come open before that place since is found at the head of the bucket, or once the
 * walk has come to its end; where nothing is found at all everything is gone over, so that nothing is left out.
 */
export async function walkQueue(
  db: Kysely<DB>,
  asker: Asker,
  { order, limit, marks, free = false }: { order: WalkOrder; limit: number; marks: WalkMarks; free?: boolean },
): Promise<WalkedCandidate[]> {
  const walks = (await listOpenBuckets(db, asker)).map((bucket) => ({
    bucket,
    mark: marks(asker, `${order} ${free} ${bucket.gradesGiven} ${bucket.firstPass}`),
  }))
  const found: WalkedCandidate[] = []
  for (const walk of walks) {
    const wanted = order === 'number' ? limit - found.length : limit
    if (wanted > 0) found.push(...(await walkFromMark(db, asker, { ...walk, order, limit: wanted, free })))
  }
  if (found.length === 0) {
    for (const { bucket, mark } of walks) {
      if (bucket.size > LONG && !mark.mayLookBack()) continue
      found.push(...noted(mark, await walkBucket(db, asker, { bucket, order, from: null, limit, most: null, free })))
    }
  }
  if (order !== 'number') found.sort((a, b) => b.key - a.key || a.spread - b.spread)
  return found.slice(0, limit)
}

/** Rows at the head of a bucket that are looked at each time: there stands what has become most wanted since. */
const HEAD = 200
/** Candidates of a bucket that is gone over in vain only now and then. */
const LONG = 20_000

async function walkFromMark(
  db: Kysely<DB>,
  asker: Asker,
  { mark, ...sought }: { bucket: Bucket; mark: WalkMark; order: WalkOrder; limit: number; free: boolean },
): Promise<WalkedCandidate[]> {
  const { bucket, order, limit } = sought
  const walk = { ...sought, from: null, most: null }
  if (!mark.place) return noted(mark, await walkBucket(db, asker, walk))
  const ahead = noted(mark, await walkBucket(db, asker, { ...walk, from: mark.place }))
  const enough = Math.min(limit, bucket.open)
  if (ahead.length < enough && mark.mayLookBack()) return noted(mark, await walkBucket(db, asker, walk))
  if (order === 'number') return ahead
  const known = new Set(ahead.map(({ id }) => id))
  const head = await walkBucket(db, asker, { ...walk, most: HEAD })
  return [...head.filter(({ id }) => !known.has(id)), ...ahead]
}

const END = { key: -Infinity, spread: Number.MAX_SAFE_INTEGER }

function noted(mark: WalkMark, found: WalkedCandidate[]): WalkedCandidate[] {
  mark.place = found.length > 0 ? { key: found[0].key, spread: found[0].spread } : END
  return found
}
