import 'server-only'
import type { Kysely } from 'kysely'
import { findCandidate } from '@/db/queries/candidates'
import { insertMessage, listParticipants, type Participant } from '@/db/queries/discussion'
import type { DB } from '@/db/schema'
import type { Candidate } from '@/db/schema/intake'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { config } from '@/lib/platform/config/config'
import { queueMail } from '@/lib/platform/mail/queue-mail'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import { candidateNumber } from '@/lib/work/campaigns/candidate-number'
import { noteTold, revealedTo } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { mentionMail } from './mention-mail'
import { partsOf, plainOf, resolveMentions } from './mentions'
import type { MessageInput } from './message-input'

/**
 * Appends a message to the discussion of a candidate; whoever it mentions is written to. Leads and graders write, graders once
 * they have judged the candidate themselves. A grader whose mail carries the message has been told of the others' judgement:
 * from then on their own grade stands. Message, mentions, mails and audit event are written together.
 * @throws Problem 404 no such candidate here; 409 `grade-first`.
 */
export async function postMessage(
  db: Kysely<DB>,
  permit: CampaignPermit<'grade'>,
  candidateId: number,
  input: MessageInput,
): Promise<{ messageId: number; mentioned: string[]; unknown: string[] }> {
  const { campaign, viewer, role } = permit
  return db.transaction().execute(async (transaction) => {
    const candidate = await findCandidate(transaction, campaign.id, candidateId)
    if (!candidate) throw notFound('candidate')
    if (!(await revealedTo(transaction, permit, [candidateId])).has(candidateId)) {
      throw conflict(
        'grade-first',
        'The discussion opens once you have graded this candidate yourself, so that nobody’s judgement sways yours.',
      )
    }
    const people = await listParticipants(transaction, campaign.id, candidateId)
    const { body, personIds, unknown } = resolveMentions(input.body, people, role === 'lead')
    const mentioned = people.filter(({ personId }) => personIds.includes(personId) && personId !== viewer.id)
    const messageId = await insertMessage(transaction, {
      campaignId: campaign.id,
      candidateId,
      personId: viewer.id,
      body,
      mentions: mentioned.map(({ personId }) => personId),
      now: isoTime(),
    })
    for (const person of mentioned) await writeTo(transaction, permit, candidate, person, { body, mentioned, people })
    await recordEvent(transaction, {
      personId: viewer.id,
      campaignId: campaign.id,
      action: 'discussion.wrote',
      subject: candidate.name,
      detail: { message: messageId, mentioned: mentioned.map(({ personId }) => personId) },
    })
    const called = mentioned.map(({ name, pseudonym }) => (role === 'lead' ? name : pseudonym))
    return { messageId, mentioned: called, unknown }
  })
}

async function writeTo(
  transaction: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'grade'>,
  candidate: Candidate,
  person: Participant,
  message: { body: string; mentioned: readonly Participant[]; people: readonly Participant[] },
): Promise<void> {
  if (!person.email) return
  const named = person.role === 'lead'
  const told = named || person.judged === 1
  if (told && !named) await noteTold(transaction, campaign.id, person, candidate.id)
  const author = message.people.find(({ personId }) => personId === viewer.id)
  const by = named ? viewer.name : (author?.pseudonym ?? 'A member')
  const text = plainOf(partsOf(message.body, message.mentioned, { personId: person.personId, named }))
  const mail = mentionMail({
    email: person.email,
    campaignName: campaign.name,
    candidate: told ? candidate.name : candidateNumber(candidate.id),
    link: `${config().siteUrl}/campaigns/${campaign.slug}/candidates/${candidate.id}#discussion`,
    message: told ? { by, text } : null,
  })
  await queueMail(transaction, mail)
}
