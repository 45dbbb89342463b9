import 'server-only'
import type { Kysely } from 'kysely'
import { findAsk, setAsksWithdrawn } from '@/db/queries/asked-looks'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

/**
 * Takes an asked look back: it leaves the person's bench. The row stays.
 * @throws Problem 404 not of this campaign; 409 `look-given`, `look-withdrawn`.
 */
export async function withdrawAsk(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  askId: number,
): Promise<{ name: string }> {
  return db.transaction().execute(async (transaction) => {
    const ask = await findAsk(transaction, permit.campaign.id, askId)
    if (!ask) throw notFound('asked look')
    if (ask.answeredAt) throw conflict('look-given', `${ask.name} has given this look already, and it counts.`)
    if (ask.withdrawnAt) throw conflict('look-withdrawn', 'This look was withdrawn already.')
    await setAsksWithdrawn(transaction, { askId }, isoTime())
    await recordEvent(transaction, {
      personId: permit.viewer.id,
      campaignId: permit.campaign.id,
      action: 'discussion.look-withdrawn',
      subject: String(ask.candidateId),
      detail: { ask: askId, of: ask.personId },
    })
    return { name: ask.name }
  })
}
