import 'server-only'
import type { Kysely } from 'kysely'
import { hasImagedCandidate, type QueuedCandidate } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { turnGeometry } from '@/lib/science/imaging/turn-geometry'
import { withCalled } from '@/lib/work/campaigns/called'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type CandidatePictures } from '@/lib/work/stamps/candidate-pictures'
import type { AskedLook } from './asked-looks'
import { lendCandidates } from './lend-candidates'
import { queueProgress, type QueueProgress } from './queue-progress'

/**
 * What a grader gets to see of a candidate before grading it: nothing that others, the machine or the rule made of it, and a number
 * for its name until they have judged it.
 */
export interface BenchCandidate extends QueuedCandidate, CandidatePictures {
  /** A lead has asked this person by name for this look. */
  asked?: AskedLook
  /**
   * An own earlier candidate that comes back, to be shown turned: by quarters counter-clockwise, 0 to 3, mirrored left to right first
   * from 4 on. Scale and compass are those of the picture as it is to be shown.
   */
  turned?: number
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
    candidates: (await withCalled(db, permit, lent.candidates)).flatMap((candidate) => {
      const shown = pictures.get(candidate.id)
      if (!shown) return []
      return [{ ...candidate, ...('turned' in candidate ? turnPictures(shown, candidate.turned) : shown) }]
    }),
    until: lent.until,
    imaged: await hasImagedCandidate(db, campaign.id),
    ...(await queueProgress(db, permit)),
  }
}

function turnPictures(pictures: CandidatePictures, turned: number): CandidatePictures {
  const views = pictures.views.map((view) => ({ ...view, geometry: turnGeometry(view.geometry, turned) }))
  return { ...pictures, views, geometry: turnGeometry(pictures.geometry, turned) }
}
