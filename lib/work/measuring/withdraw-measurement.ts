import 'server-only'
import { randomUUID } from 'node:crypto'
import type { Kysely } from 'kysely'
import { findCandidate } from '@/db/queries/candidates'
import { insertMeasurement, listStandingOf } from '@/db/queries/measuring'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * Takes back an own measurement that stands: it counts no more and stays as a row.
 * @throws Problem 404 no such candidate here; 409 `not-standing`: somebody else's, or replaced or withdrawn already.
 */
export async function withdrawMeasurement(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'grade'>,
  candidateId: number,
  measurementId: number,
): Promise<void> {
  await db.transaction().execute(async (transaction) => {
    const candidate = await findCandidate(transaction, campaign.id, candidateId)
    if (!candidate) throw notFound('candidate')
    const standing = await listStandingOf(transaction, candidateId, viewer.id)
    const own = standing.find(({ id }) => id === measurementId)
    if (!own) {
      throw conflict(
        'not-standing',
        'Only an own measurement that stands can be withdrawn; this one is another person’s, or was replaced or withdrawn already.',
      )
    }
    await insertMeasurement(transaction, {
      uid: randomUUID(),
      campaign_id: campaign.id,
      candidate_id: candidateId,
      person_id: viewer.id,
      event: 'withdrawn',
      kind: own.kind,
      replaces: own.id,
      at: isoTime(),
    })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'measuring.withdrew',
      subject: candidate.name,
      detail: { measurement: own.id },
    })
  })
}
