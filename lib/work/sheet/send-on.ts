import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Kysely } from 'kysely'
import { insertMarks, listCandidatesToPass, setFirstPass } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
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
