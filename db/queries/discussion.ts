import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Role } from '../schema/people'
import type { IsoTime } from '../schema/values'
import { isOwnJudgement } from './grading'

export interface Participant {
  personId: number
  name: string
  pseudonym: string
  email: string | null
  role: Role
  /** Has an own judgement of the candidate that stands. */
  judged: 0 | 1
}

/** Whether the person of a row of `person` has judged the candidate. */
const hasJudged = (candidateId: number) =>
  sql<0 | 1>`exists (select 1 from grade own
    where own.candidate_id = ${candidateId} and ${isOwnJudgement(sql.ref<number>('person.id'))})`

/** Everybody in the campaign who can take part in the discussion of a candidate: its leads and graders, by name. */
export async function listParticipants(
  db: Kysely<DB>,
  campaignId: number,
  candidateId: number,
): Promise<Participant[]> {
  return db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select(['person.id as personId', 'person.name', 'membership.pseudonym', 'person.email', 'membership.role'])
    .select(hasJudged(candidateId).as('judged'))
    .where('membership.campaign_id', '=', campaignId)
    .where('membership.ended_at', 'is', null)
    .where('membership.role', '!=', 'viewer')
    .orderBy('person.name')
    .execute()
}

export async function insertMessage(
  db: Kysely<DB>,
  message: {
    campaignId: number
    candidateId: number
    personId: number
    body: string
    mentions: readonly number[]
    now: IsoTime
  },
): Promise<number> {
  const { id } = await db
    .insertInto('message')
    .values({
      campaign_id: message.campaignId,
      candidate_id: message.candidateId,
      person_id: message.personId,
      body: message.body,
      created_at: message.now,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  if (message.mentions.length > 0) {
    await db
      .insertInto('mention')
      .values(message.mentions.map((personId) => ({ message_id: id, person_id: personId, read_at: null })))
      .execute()
  }
  return id
}

export interface MessageRow {
  id: number
  personId: number
  name: string
  pseudonym: string | null
  body: string
  at: IsoTime
}

/** The messages on a candidate, oldest first. */
export async function listMessages(db: Kysely<DB>, candidateId: number): Promise<MessageRow[]> {
  return db
    .selectFrom('message')
    .innerJoin('person', 'person.id', 'message.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'message.person_id')
        .onRef('membership.campaign_id', '=', 'message.campaign_id'),
    )
    .select([
      'message.id',
      'message.person_id as personId',
      'person.name',
      'membership.pseudonym',
      'message.body',
      'message.created_at as at',
    ])
    .where('message.candidate_id', '=', candidateId)
    .orderBy('message.id')
    .execute()
}

export interface MentionedPerson {
  messageId: number
  personId: number
  name: string
  pseudonym: string
}

/** Who is mentioned in the messages on a candidate. */
export async function listMentionedOn(db: Kysely<DB>, candidateId: number): Promise<MentionedPerson[]> {
  return db
    .selectFrom('mention')
    .innerJoin('message', 'message.id', 'mention.message_id')
    .innerJoin('person', 'person.id', 'mention.person_id')
    .innerJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'mention.person_id')
        .onRef('membership.campaign_id', '=', 'message.campaign_id'),
    )
    .select(['mention.message_id as messageId', 'mention.person_id as personId', 'person.name', 'membership.pseudonym'])
    .where('message.candidate_id', '=', candidateId)
    .execute()
}

/** The person has read the discussion of the candidate. */
export async function setMentionsRead(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
  now: IsoTime,
): Promise<void> {
  await db
    .updateTable('mention')
    .set({ read_at: now })
    .where('person_id', '=', personId)
    .where('read_at', 'is', null)
    .where('message_id', 'in', (e) =>
      e.selectFrom('message').select('message.id').where('message.candidate_id', '=', candidateId),
    )
    .execute()
}

export async function countUnreadMentions(db: Kysely<DB>, campaignId: number, personId: number): Promise<number> {
  const row = await db
    .selectFrom('mention')
    .innerJoin('message', 'message.id', 'mention.message_id')
    .select((e) => e.fn.countAll<number>().as('n'))
    .where('mention.person_id', '=', personId)
    .where('mention.read_at', 'is', null)
    .where('message.campaign_id', '=', campaignId)
    .executeTakeFirstOrThrow()
  return row.n
}

export interface MentionRow {
  messageId: number
  candidateId: number
  candidate: string
  name: string
  pseudonym: string | null
  body: string
  at: IsoTime
  readAt: IsoTime | null
}

/** Where a person was mentioned in a campaign, newest first. */
export async function listMentionsOf(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  limit: number,
): Promise<MentionRow[]> {
  return db
    .selectFrom('mention')
    .innerJoin('message', 'message.id', 'mention.message_id')
    .innerJoin('candidate', 'candidate.id', 'message.candidate_id')
    .innerJoin('person', 'person.id', 'message.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'message.person_id')
        .onRef('membership.campaign_id', '=', 'message.campaign_id'),
    )
    .select([
      'message.id as messageId',
      'message.candidate_id as candidateId',
      'candidate.name as candidate',
      'person.name',
      'membership.pseudonym',
      'message.body',
      'message.created_at as at',
      'mention.read_at as readAt',
    ])
    .where('mention.person_id', '=', personId)
    .where('message.campaign_id', '=', campaignId)
    .orderBy('mention.message_id', 'desc')
    .limit(limit)
    .execute()
}
