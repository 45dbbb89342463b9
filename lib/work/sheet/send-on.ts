import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Kysely } from 'kysely'
import { insertMarks, listCandidatesToPass, setFirstPass } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { conflict } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * Sends on what the first pass has dropped, by a mark of this lead, and says whether there was anything to send on. Call it in the
 * transaction of what makes it wanted.
 */
export async function sendOnDropped(
  transaction: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'lead'>,
  candidateId: number,
  at: IsoTime,
): Promise<boolean> {
  const [candidate] = await listCandidatesToPass(transaction, campaign.id, [candidateId])
  if (!candidate || candidate.calibration || candidate.firstPass !== 'dropped') return false
  await insertMarks(transaction, [
    {
      uid: randomUUID(),
      campaign_id: campaign.id,
      candidate_id: candidateId,
      person_id: viewer.id,
      mark: 'sent on',
      at,
    },
  ])
  await setFirstPass(transaction, [candidateId], 'sent on')
  if (campaign.uses_sheet === 1) await requestConsensus(transaction, campaign.id)
  return true
}

/** A lead's own word that a candidate goes to the bench; the consensus follows at once. @throws Problem 409 `not-dropped` */
export async function sendOn(db: Kysely<DB>, permit: CampaignPermit<'lead'>, candidateId: number): Promise<void> {
  const sent = await db
    .transaction()
    .execute((transaction) => sendOnDropped(transaction, permit, candidateId, isoTime()))
  if (!sent)
    throw conflict(
      'not-dropped',
      'The first pass has not dropped it, or somebody has sent it on meanwhile. Load the page again.',
    )
}
