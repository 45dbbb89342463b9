import 'server-only'
import type { Kysely } from 'kysely'
import { countUnreadMentions, listMentionedOn, listMentionsOf } from '@/db/queries/discussion'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import { calledTo } from '@/lib/work/campaigns/called'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { askedOfMe } from './list-asks'
import { partsOf, plainOf } from './mentions'

export interface Mention {
  messageId: number
  candidateId: number
  candidate: string
  at: IsoTime
  unread: boolean
  /** null: the candidate is to be graded first. */
  message: { by: string; text: string } | null
}

const MOST_MENTIONS = 100

/** Where the person who asks was mentioned, newest first. */
export async function mentionsOfMe(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<Mention[]> {
  const { campaign, viewer, role } = permit
  const rows = await listMentionsOf(db, campaign.id, viewer.id, MOST_MENTIONS)
  const ids = [...new Set(rows.map(({ candidateId }) => candidateId))]
  const revealed = await revealedTo(db, permit, ids)
  const called = await calledTo(db, permit, ids)
  await noteShown(db, permit, [...revealed])
  const named = role === 'lead'
  const mentions: Mention[] = []
  for (const row of rows) {
    const mentioned = revealed.has(row.candidateId) ? await listMentionedOn(db, row.candidateId) : null
    mentions.push({
      messageId: row.messageId,
      candidateId: row.candidateId,
      candidate: called({ id: row.candidateId, name: row.candidate }),
      at: row.at,
      unread: row.readAt === null,
      message: mentioned && {
        by: named ? row.name : (row.pseudonym ?? 'a member'),
        text: plainOf(
          partsOf(
            row.body,
            mentioned.filter(({ messageId }) => messageId === row.messageId),
            { personId: viewer.id, named },
          ),
        ),
      },
    })
  }
  return mentions
}

/** What waits for the person who asks: looks asked of them, and mentions that they have not read. */
export async function waitingFor(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
): Promise<{ asked: number; mentions: number }> {
  return {
    asked: await askedOfMe(db, permit),
    mentions: await countUnreadMentions(db, permit.campaign.id, permit.viewer.id),
  }
}
