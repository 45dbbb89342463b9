import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidate } from '@/db/queries/candidates'
import { listMentionedOn, listMessages, listParticipants, setMentionsRead } from '@/db/queries/discussion'
import type { DB } from '@/db/schema'
import type { IsoTime } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { noteShown, revealedTo } from '@/lib/work/grading/may-reveal'
import { roleMay, type CampaignPermit } from '@/lib/work/people/permission'
import { labelsOf, partsOf, type MessagePart } from './mentions'

export interface ThreadMessage {
  id: number
  /** The name for leads, the pseudonym for everybody else. */
  by: string
  own: boolean
  at: IsoTime
  parts: MessagePart[]
}

/** Somebody the reader can mention, by the label that they write. */
export interface Mentionable {
  label: string
  lead: boolean
  /** For leads: whether the person can read the discussion now, or grades the candidate first. */
  reads: boolean | null
}

export interface Thread {
  /** oldest first */
  messages: ThreadMessage[]
  mentionable: Mentionable[]
  mayWrite: boolean
}

/**
 * The discussion of a candidate, and with it the reader's mentions there are read. Leads and viewers read all; a grader reads it
 * after their own judgement, and null before. Viewers write nothing.
 */
export async function readThread(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<Thread | null> {
  const { campaign, viewer, role } = permit
  const candidate = await findCandidate(db, campaign.id, candidateId)
  if (!candidate || (candidate.truth !== null && !candidateScope(permit).withCalibration)) return null
  if (!(await revealedTo(db, permit, [candidateId])).has(candidateId)) return null
  await noteShown(db, permit, [candidateId])
  const [rows, mentioned] = await Promise.all([listMessages(db, candidateId), listMentionedOn(db, candidateId)])
  if (mentioned.some(({ personId }) => personId === viewer.id)) {
    await setMentionsRead(db, candidateId, viewer.id, isoTime())
  }
  const named = role === 'lead'
  const mayWrite = roleMay(role, 'grade')
  return {
    messages: rows.map((row) => ({
      id: row.id,
      by: named ? row.name : (row.pseudonym ?? 'a member'),
      own: row.personId === viewer.id,
      at: row.at,
      parts: partsOf(
        row.body,
        mentioned.filter(({ messageId }) => messageId === row.id),
        { personId: viewer.id, named },
      ),
    })),
    mentionable: mayWrite ? await mentionable(db, permit, candidateId) : [],
    mayWrite,
  }
}

async function mentionable(
  db: Kysely<DB>,
  { campaign, viewer, role }: CampaignPermit<'read'>,
  candidateId: number,
): Promise<Mentionable[]> {
  const named = role === 'lead'
  const people = await listParticipants(db, campaign.id, candidateId)
  const others = people.filter(({ personId }) => personId !== viewer.id)
  return labelsOf(people, named).flatMap(({ personId, label }) => {
    const person = others.find((one) => one.personId === personId)
    if (!person) return []
    const lead = person.role === 'lead'
    return [{ label, lead, reads: named ? lead || person.judged === 1 : null }]
  })
}
