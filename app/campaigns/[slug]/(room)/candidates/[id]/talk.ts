import 'server-only'
import type { Kysely } from 'kysely'
import type { Talk } from '@/components/discussion/talk'
import type { DB } from '@/db/schema'
import { askableAt, asksOf } from '@/lib/work/discussion/list-asks'
import { readThread } from '@/lib/work/discussion/read-thread'
import { permitCampaign, type CampaignPermit } from '@/lib/work/people/permission'
import { askLooksAction, postMessageAction, withdrawAskAction } from './actions'

/** Discussion and asked looks of a candidate with their forms; null where the reader may not see them yet. */
export async function talkOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
  { calibration }: { calibration: boolean },
): Promise<Talk | null> {
  const thread = await readThread(db, permit, candidateId)
  if (!thread) return null
  const { slug } = permit.campaign
  const asks = await asksOf(db, permit, candidateId)
  const talk = {
    thread,
    asks,
    post: thread.mayWrite ? postMessageAction.bind(null, slug, candidateId) : null,
    draftKey: `${permit.viewer.id}-${candidateId}`,
  }
  if (permit.role !== 'lead' || calibration) return { ...talk, asking: null }
  const lead = await permitCampaign(db, permit.viewer, slug, 'lead')
  return {
    ...talk,
    asking: {
      people: await askableAt(db, lead, candidateId),
      ask: askLooksAction.bind(null, slug, candidateId),
      withdraw: withdrawAskAction.bind(null, slug),
    },
  }
}
