import 'server-only'
import type { Kysely } from 'kysely'
import { findLeftOut, insertLeftOut } from '@/db/queries/left-out'
import { findMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { requestConsensus } from '@/lib/platform/jobs/request-consensus'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { LeaveOutInput } from './leave-out-input'

export interface LeaveOutAnswer {
  /** Of the row that was appended. */
  id: number
  name: string
}

/**
 * Leaves a grader's grades out of the consensus, or counts them again. The grades stay; a new row says from when, by whom and
 * why, and the consensus is asked for, which judges with the grades that count then. Somebody whose membership has ended can be
 * left out too, because their grades count on.
 * @throws Problem 404 never a member of this campaign, 409 `left-out-already` or `counted-already`; ZodError on a reason
 *   that is empty or too long.
 */
export async function leaveOut(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: { personId: number; leftOut: boolean; reason: string },
): Promise<LeaveOutAnswer> {
  const { personId, leftOut, reason } = LeaveOutInput.parse(input)
  const { campaign, viewer } = permit
  return db.transaction().execute(async (transaction) => {
    const member = await findMembership(transaction, campaign.id, personId)
    if (!member) throw notFound('member')
    const standing = await findLeftOut(transaction, campaign.id, personId)
    if ((standing?.left_out === 1) === leftOut) throw alreadySo(member.name, leftOut)
    const id = await insertLeftOut(transaction, {
      campaignId: campaign.id,
      personId,
      leftOut,
      reason,
      decidedBy: viewer.id,
      now: isoTime(),
    })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: leftOut ? 'consensus.grader-left-out' : 'consensus.grader-counted-again',
      subject: String(personId),
      detail: { reason },
    })
    await requestConsensus(transaction, campaign.id)
    return { id, name: member.name }
  })
}

function alreadySo(name: string, leftOut: boolean) {
  return leftOut
    ? conflict('left-out-already', `${name} is left out of the consensus already. Nothing was changed.`)
    : conflict('counted-already', `The grades of ${name} count already. Nothing was changed.`)
}
