import 'server-only'
import type { Kysely } from 'kysely'
import { hasImagedCandidate, type QueuedCandidate } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type CandidatePictures } from '@/lib/work/stamps/candidate-pictures'
import type { AskedLook } from './asked-looks'
import { lendCandidates } from './lend-candidates'
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

/** The next candidates for this person with their pictures, lent as `lendCandidates` says, and how far they are. */
export async function lendNext(db: Kysely<DB>, permit: CampaignPermit<'grade'>, count: number): Promise<LentQueue> {
  const { campaign } = permit
  const lent = await lendCandidates(db, permit, count)
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
