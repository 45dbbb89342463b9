import 'server-only'
import type { Kysely } from 'kysely'
import {
  deleteExpiredLeases,
  hasImagedCandidate,
  insertLeases,
  listLentCandidates,
  listNextCandidates,
  setLeasesUntil,
  type QueuedCandidate,
} from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type CandidatePictures } from '@/lib/work/stamps/candidate-pictures'
import { askedLooks, besides, type AskedLook } from './asked-looks'
import { LEASE_MS, MOST_LENT } from './lease-time'
import { queueProgress, type QueueProgress } from './queue-progress'

/** What a grader gets to see of a candidate before grading it: nothing that others, the machine or the rule made of it. */
export interface BenchCandidate extends QueuedCandidate, CandidatePictures {
  /** A lead has asked this person by name for this look. */
  asked?: AskedLook
}

export interface LentQueue extends QueueProgress {
  candidates: BenchCandidate[]
  /** When the leases run out, unless asked again before. */
  until: IsoTime
  /** Whether the campaign has anything to grade at all. */
  imaged: boolean
}

/**
 * The next candidates for this person: first the looks that were asked of them, then, lent for LEASE_MINUTES, what they hold
 * already, in the same order and renewed, and new ones. One immediate transaction reads the room that is left and takes it, so standing grades and live leases together
 * never exceed the wanted number, however many ask at once.
 */
export async function lendNext(db: Kysely<DB>, permit: CampaignPermit<'grade'>, count: number): Promise<LentQueue> {
  const { campaign, viewer } = permit
  const wanted = Math.min(count, MOST_LENT)
  const lent = await db.transaction().execute(async (transaction) => {
    const { gradesWanted } = await ruleInForce(transaction, campaign.id)
    const now = isoTime()
    const until = isoTime(LEASE_MS)
    const asker = { campaignId: campaign.id, personId: viewer.id, gradesWanted, now }
    await deleteExpiredLeases(transaction, campaign.id, now)
    const asked = await askedLooks(transaction, asker, wanted)
    const room = wanted - asked.length
    const held = besides(asked, await listLentCandidates(transaction, asker, wanted)).slice(0, room)
    if (held.length > 0) {
      const ids = held.map(({ id }) => id)
      await setLeasesUntil(transaction, viewer.id, ids, until)
    }
    const next =
      held.length < room
        ? besides(asked, await listNextCandidates(transaction, asker, wanted - held.length)).slice(
            0,
            room - held.length,
          )
        : []
    if (next.length > 0) {
      const candidateIds = next.map(({ id }) => id)
      await insertLeases(transaction, { campaignId: campaign.id, personId: viewer.id, candidateIds, until })
    }
    return { candidates: [...asked, ...held, ...next], until }
  })
  const pictures = await picturesOf(
    db,
    campaign,
    lent.candidates.map(({ id }) => id),
  )
  return {
    candidates: lent.candidates.flatMap((candidate) => {
      const shown = pictures.get(candidate.id)
      return shown ? [{ ...candidate, ...shown }] : []
    }),
    until: lent.until,
    imaged: await hasImagedCandidate(db, campaign.id),
    ...(await queueProgress(db, permit)),
  }
}
