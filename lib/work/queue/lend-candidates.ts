import 'server-only'
import type { Kysely } from 'kysely'
import { countLooks, findMix } from '@/db/queries/mixing'
import {
  countOthersLeases,
  deleteExpiredLeases,
  insertLeases,
  listLentCandidates,
  listNextByLead,
  setLeasesUntil,
  type Asker,
  type QueuedCandidate,
} from '@/db/queries/queue'
import type { RepeatCandidate } from '@/db/queries/repeats'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { Role } from '@/db/schema/people'
import type { IsoTime } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'
import { ruleInForce, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { askedLooks, besides, type AskedCandidate } from './asked-looks'
import { askerOf } from '@/lib/work/campaigns/asker'
import { chooseLooks } from './choose-looks'
import { LEASE_MS, MOST_LENT } from './lease-time'
import { ratesIn } from './lens-estimate'
import { measuringStamps } from './measuring-stamps'
import { kindOf, mix } from './mix'
import { newestModel } from './model-of-run'
import { orderSeed, personStream } from './person-stream'
import { amongHeld, bringBack, repeatable } from './repeats'
import { walkMarks, type WalkMarks } from './walk-marks'
import { walkQueue } from './walk-queue'
import { walkShuffled } from './walk-shuffled'

export interface LentCandidates {
  /** Those that come back to the person say how they are turned. */
  candidates: (QueuedCandidate | AskedCandidate | RepeatCandidate)[]
  /** When the leases run out, unless asked again before. */
  until: IsoTime
}

interface QueuePlan {
  rule: RuleInForce
  role: Role
  /** Of the mean method. */
  order: Campaign['queue_order']
  marks: WalkMarks
}

/**
 * The next candidates for this person: first the looks that were asked of them, then, lent for LEASE_MINUTES, what they hold
 * already, in the same order and renewed, and new ones. One immediate transaction reads the room that is left and takes it, so
 * standing grades and live leases together never exceed the wanted number, however many ask at once.
 */
export async function lendCandidates(
  db: Kysely<DB>,
  { campaign, viewer, role }: CampaignPermit<'grade'>,
  count: number,
): Promise<LentCandidates> {
  const wanted = Math.min(count, MOST_LENT)
  return db.transaction().execute(async (transaction) => {
    const rule = await ruleInForce(transaction, campaign.id)
    const now = isoTime()
    const until = isoTime(LEASE_MS)
    const asker = askerOf(campaign, viewer.id, rule, now)
    const plan = { rule, role, order: campaign.queue_order, marks: walkMarks(db) }
    await deleteExpiredLeases(transaction, campaign.id, now)
    const asked = await askedLooks(transaction, asker, wanted)
    const room = wanted - asked.length
    const lent = await listLentCandidates(transaction, asker, wanted)
    const { together, waiting } = await amongHeld(transaction, asker, lent)
    const held = besides(asked, together).slice(0, room)
    if (held.length > 0) {
      const ids = held.map(({ id }) => id)
      await setLeasesUntil(transaction, viewer.id, ids, until)
    }
    const more = room - held.length
    const next = more > 0 ? await listMixed(transaction, asker, plan, { asked, held: held.length, more, waiting }) : []
    const candidateIds = next.filter((one) => !('turned' in one)).map(({ id }) => id)
    if (candidateIds.length > 0) {
      await insertLeases(transaction, { campaignId: campaign.id, personId: viewer.id, candidateIds, until })
    }
    return { candidates: [...asked, ...held, ...next], until }
  })
}

/** What is lent anew: what is wanted next, with calibration stamps and own candidates among it at the places drawn for them. */
async function listMixed(
  transaction: Kysely<DB>,
  asker: Asker,
  plan: QueuePlan,
  {
    asked,
    held,
    more,
    waiting,
  }: { asked: readonly AskedCandidate[]; held: number; more: number; waiting: readonly RepeatCandidate[] },
): Promise<(QueuedCandidate | RepeatCandidate)[]> {
  const wanted = await listNext(transaction, asker, plan, more + asked.length)
  const ordinary = besides(asked, wanted).slice(0, more)
  const { stamps, calibrationShare, repeatShare } = await findMix(transaction, asker.campaignId)
  if ((stamps === 0 || calibrationShare === 0) && repeatShare === 0) return ordinary
  if (ordinary.length === 0) return []
  const shares = { calibration: calibrationShare, repeat: repeatShare }
  const stream = await personStream(transaction, asker.campaignId, asker.personId)
  const drawAt = (place: number) => stream.at(place)
  const place = (await countLooks(transaction, asker.campaignId, asker.personId)) + held
  const kinds = Array.from({ length: more }, (_, k) => kindOf(drawAt(place + k), shares))
  const { role } = plan
  const unseen = kinds.includes('stamp') ? besides(asked, await measuringStamps(transaction, { ...asker, role })) : []
  // Rather not the galaxy that the person remembers.
  const strange = unseen.filter(({ galaxySeen }) => galaxySeen === 0)
  const stampsToMix = (strange.length > 0 ? strange : unseen).map(asQueued)
  const repeats = kinds.includes('repeat') ? besides(asked, await repeatable(transaction, asker)) : []
  const queue = mix<QueuedCandidate | RepeatCandidate>(
    { ordinary, stamps: stampsToMix, waiting, repeats },
    drawAt,
    place,
    more,
    shares,
  )
  const back = await bringBack(
    transaction,
    asker,
    queue.flatMap(({ kind, item }, k) =>
      kind === 'repeat' && !('turned' in item) ? { item, draw: drawAt(place + k) } : [],
    ),
  )
  return queue.map(({ kind, item }) =>
    kind === 'repeat' && !('turned' in item) ? back.find(({ id }) => id === item.id)! : item,
  )
}

/** Those that a lead has reopened come before what the rule wants. */
async function listNext(
  transaction: Kysely<DB>,
  asker: Asker,
  plan: QueuePlan,
  limit: number,
): Promise<QueuedCandidate[]> {
  const reopened = await listNextByLead(transaction, asker, limit)
  const rest = limit - reopened.length
  if (rest <= 0) return reopened
  const { rule, order, marks } = plan
  if (rule.method === 'reliability') {
    return [...reopened, ...(await listMostInformative(transaction, asker, { rule, marks }, rest))]
  }
  if (order === 'shuffled') {
    const seed = await orderSeed(transaction, asker.campaignId, asker.personId)
    return [...reopened, ...(await walkShuffled(transaction, asker, { seed, limit: rest, marks }))]
  }
  const by = { order: order === 'score' ? order : 'number', limit: rest, marks } as const
  return [...reopened, ...(await walkQueue(transaction, asker, by)).map(asQueued)]
}

/** Candidates among which a grader's next is chosen, and one more for each that somebody else holds, up to the most. */
const IN_REACH = 50
const MOST_IN_REACH = 400

async function listHeldToo(transaction: Kysely<DB>, asker: Asker, marks: WalkMarks) {
  const others = await countOthersLeases(transaction, asker)
  return walkQueue(transaction, asker, { order: 'look', limit: Math.min(IN_REACH + others, MOST_IN_REACH), marks })
}

/** Of the candidates whose next look tells most, those that a look of this grader settles likelier than another's. */
async function listMostInformative(
  transaction: Kysely<DB>,
  asker: Asker,
  { rule, marks }: { rule: Extract<RuleInForce, { method: 'reliability' }>; marks: WalkMarks },
  limit: number,
): Promise<QueuedCandidate[]> {
  const free = await walkQueue(transaction, asker, { order: 'look', limit: IN_REACH, marks, free: true })
  // What somebody else holds comes behind all that nobody does, and costs more to look through.
  const rows = free.length >= limit ? free : await listHeldToo(transaction, asker, marks)
  const run = await newestModel(transaction, asker.campaignId)
  const inReach = rows.map(({ evidence, probability, grades, ...row }) => ({
    ...row,
    evidence: evidence ?? 0,
    probability: probability ?? run?.model.lensShare ?? 0.5,
    grades: grades ?? 0,
  }))
  const chooser = {
    own: run ? ratesIn(run.model, asker.personId) : { lens: [], notLens: [] },
    everybody: run?.model.everybody ?? [],
    boundaries: waldBoundaries(rule),
    leastGrades: rule.leastGrades,
  }
  return chooseLooks(inReach, chooser, limit).map(asQueued)
}

const asQueued = ({ id, name, raDeg, decDeg }: QueuedCandidate): QueuedCandidate => ({ id, name, raDeg, decDeg })
