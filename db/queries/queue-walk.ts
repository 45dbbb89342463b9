/** Walks over what may be lent, each along an index of its own: see 010-queue-counts. */
import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { Asker, QueuedCandidate } from './queue'

/** Candidates with as many grades and alike in the first pass: `open` of its `size` this person has not graded. */
export interface Bucket {
  gradesGiven: number
  firstPass: 'waiting' | 'sent on' | 'dropped'
  open: number
  size: number
}

/** What the rule wants and this person has not graded, nearest to the wanted number first. It reads a few counters. */
export async function listOpenBuckets(db: Kysely<DB>, asker: Asker): Promise<Bucket[]> {
  const { rows } = await sql<Bucket>`
    select grades_given as gradesGiven, first_pass as firstPass,
      sum(case person_id when 0 then n else -n end) as open,
      sum(case person_id when 0 then n else 0 end) as size
    from queue_count
    where campaign_id = ${asker.campaignId} and person_id in (0, ${asker.personId})
      and grades_given < ${asker.gradesWanted}
      and (settled = 0 or ${asker.untilSettled ? 0 : 1}) and (first_pass = 'sent on' or ${asker.usesSheet ? 0 : 1})
    group by 1, 2 having open > 0
    order by 1 desc, 2`.execute(db)
  return rows
}

/** All candidates that are counted: imaged, no stamps, not decided. */
export async function countQueued(db: Kysely<DB>, campaignId: number): Promise<number> {
  const row = await db
    .selectFrom('queue_count')
    .select((e) => e.fn.sum<number | null>('n').as('n'))
    .where('campaign_id', '=', campaignId)
    .where('person_id', '=', 0)
    .executeTakeFirstOrThrow()
  return row.n ?? 0
}

/** By number of grades; by the machine's score, those without one last; by what a look tells. */
export type WalkOrder = 'number' | 'score' | 'look'

interface Along {
  index: RawBuilder<unknown>
  key: RawBuilder<number>
}

const ALONG: Record<WalkOrder, Along> = {
  number: { index: sql`candidate_queue`, key: sql<number>`0` },
  score: { index: sql`candidate_queue_score`, key: sql<number>`ifnull(score, -1e308)` },
  look: { index: sql`candidate_queue_look`, key: sql<number>`look_value` },
}

/** A place in a bucket: keys fall, among equal keys the spread rises. */
export interface Place {
  key: number
  spread: number
}

export interface WalkedCandidate extends QueuedCandidate {
  key: number
  spread: number
  /** Live leases of other people. */
  heldByOthers: number
  /** Of its estimate; null without one. */
  evidence: number | null
  probability: number | null
  grades: number | null
}

export interface Walk {
  bucket: Bucket
  order: WalkOrder
  from: Place | null
  /** Candidates that may be found, and rows that are looked at; null for all. */
  limit: number
  most: number | null
  /** Only what nobody else holds. */
  free?: boolean
}

/** What may be lent to this person in a bucket, from a place on. */
export async function walkBucket(db: Kysely<DB>, asker: Asker, walk: Walk): Promise<WalkedCandidate[]> {
  const { from, order, limit } = walk
  const { key } = ALONG[order]
  const sorted = order === 'number' ? sql`spread` : sql`${key} desc, spread`
  if (!from) return step(db, asker, walk, { range: sql<SqlBool>`true`, sorted, limit })
  const behind = sql<SqlBool>`spread >= ${from.spread}`
  const tied = order === 'number' ? behind : sql<SqlBool>`${key} = ${from.key} and ${behind}`
  const found = await step(db, asker, walk, { range: tied, sorted: sql`spread`, limit })
  if (order === 'number' || found.length === limit) return found
  const below = { range: sql<SqlBool>`${key} < ${from.key}`, sorted, limit: limit - found.length }
  return [...found, ...(await step(db, asker, walk, below))]
}

async function step(
  db: Kysely<DB>,
  asker: Asker,
  { bucket, order, most, free = false }: Walk,
  { range, sorted, limit }: { range: RawBuilder<SqlBool>; sorted: RawBuilder<unknown>; limit: number },
): Promise<WalkedCandidate[]> {
  const { index, key } = ALONG[order]
  const unsettled = order === 'look' || asker.untilSettled ? sql`and settled = 0` : sql``
  const { rows } = await sql<WalkedCandidate>`
    select candidate.id, candidate.name, candidate.ra_deg as raDeg, candidate.dec_deg as decDeg, candidate.key, candidate.spread,
      ${othersLeases(asker)} as heldByOthers, estimate.evidence, estimate.probability, estimate.grades
    from (
      select id, name, ra_deg, dec_deg, truth, ruling_id, grades_given, looks_asked, spread, ${key} as key
      from candidate indexed by ${index}
      where campaign_id = ${asker.campaignId} and grades_given = ${bucket.gradesGiven}
        and first_pass = ${bucket.firstPass} and imaged_at is not null ${unsettled} and ${range}
      order by ${sorted} limit ${most ?? -1}
    ) candidate left join estimate on estimate.candidate_id = candidate.id
    where ${lendable(asker, free)}
    limit ${limit}`.execute(db)
  return rows
}

/** What may be lent to this person of the candidates whose spread is in [from, to). */
export async function listInSpread(
  db: Kysely<DB>,
  asker: Asker,
  range: { from: number; to: number },
): Promise<QueuedCandidate[]> {
  const sent = asker.usesSheet ? sql`and first_pass = 'sent on'` : sql``
  const { rows } = await sql<QueuedCandidate>`
    select candidate.id, candidate.name, candidate.ra_deg as raDeg, candidate.dec_deg as decDeg
    from candidate indexed by candidate_queue_shuffled
    where campaign_id + 0 = ${asker.campaignId} and imaged_at is not null
      and spread >= ${range.from} and spread < ${range.to}
      and grades_given < ${asker.gradesWanted} ${sent} and ${lendable(asker)}`.execute(db)
  return rows
}

const othersLeases = ({ personId, now }: Asker) => sql<number>`(
  select count(*) from lease other where other.candidate_id = candidate.id
    and other.person_id <> ${personId} and other.until > ${now})`

/** Open to this person, with room for one more look, and not on their bench yet. */
const lendable = (asker: Asker, free = false) => sql<SqlBool>`candidate.truth is null
  and not exists (select 1 from grade where grade.candidate_id = candidate.id and grade.person_id = ${asker.personId})
  and not exists (select 1 from lease own where own.candidate_id = candidate.id and own.person_id = ${asker.personId})
  and (candidate.ruling_id is null or not exists (select 1 from ruling
    where ruling.id = candidate.ruling_id and ruling.outcome in ('confirmed', 'set aside')))
  and candidate.grades_given + ${othersLeases(asker)} < ${free ? sql`candidate.grades_given + 1` : sql`max(${asker.gradesWanted}, candidate.looks_asked)`}`
