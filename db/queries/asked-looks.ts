import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { GradeLetter } from '../schema/grading'
import type { Role } from '../schema/people'
import type { IsoTime } from '../schema/values'

/** Asks that wait for their answer. */
function openAsks(db: Kysely<DB>) {
  return db
    .selectFrom('asked_look')
    .where('asked_look.grade_id', 'is', null)
    .where('asked_look.withdrawn_at', 'is', null)
}

export async function insertAskedLook(
  db: Kysely<DB>,
  ask: {
    campaignId: number
    candidateId: number
    personId: number
    askedBy: number
    note: string | null
    now: IsoTime
  },
): Promise<number> {
  const { id } = await db
    .insertInto('asked_look')
    .values({
      campaign_id: ask.campaignId,
      candidate_id: ask.candidateId,
      person_id: ask.personId,
      asked_by: ask.askedBy,
      note: ask.note,
      asked_at: ask.now,
      grade_id: null,
      withdrawn_at: null,
    })
    .returning('id')
    .executeTakeFirstOrThrow()
  return id
}

export async function findOpenAsk(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
): Promise<{ id: number } | null> {
  const row = await openAsks(db)
    .select('asked_look.id')
    .where('asked_look.candidate_id', '=', candidateId)
    .where('asked_look.person_id', '=', personId)
    .executeTakeFirst()
  return row ?? null
}

/** What became of an ask of the person on the candidate: of the one with this id, or of their newest. */
export async function findAskOf(
  db: Kysely<DB>,
  candidateId: number,
  personId: number,
  which: number | 'newest',
): Promise<{ id: number; answered: 0 | 1; withdrawn: 0 | 1 } | null> {
  const row = await db
    .selectFrom('asked_look')
    .select('id')
    .select([sql<0 | 1>`grade_id is not null`.as('answered'), sql<0 | 1>`withdrawn_at is not null`.as('withdrawn')])
    .where('candidate_id', '=', candidateId)
    .where('person_id', '=', personId)
    .$if(which !== 'newest', (query) => query.where('id', '=', Number(which)))
    .orderBy('id', 'desc')
    .limit(1)
    .executeTakeFirst()
  return row ?? null
}

/** The answer is here; a lease that the person held on the candidate has served. */
export async function setAskAnswered(
  db: Kysely<DB>,
  ask: { id: number; gradeId: number; candidateId: number; personId: number },
): Promise<void> {
  await db.updateTable('asked_look').set({ grade_id: ask.gradeId }).where('id', '=', ask.id).execute()
  await db
    .deleteFrom('lease')
    .where('candidate_id', '=', ask.candidateId)
    .where('person_id', '=', ask.personId)
    .execute()
}

/** Takes open asks back: one of them, all of a candidate, or all of a person in a campaign. Answers how many there were. */
export async function setAsksWithdrawn(
  db: Kysely<DB>,
  which: { askId: number } | { candidateId: number } | { campaignId: number; personId: number },
  now: IsoTime,
): Promise<number> {
  let update = db
    .updateTable('asked_look')
    .set({ withdrawn_at: now })
    .where('grade_id', 'is', null)
    .where('withdrawn_at', 'is', null)
  if ('askId' in which) update = update.where('id', '=', which.askId)
  else if ('candidateId' in which) update = update.where('candidate_id', '=', which.candidateId)
  else update = update.where('campaign_id', '=', which.campaignId).where('person_id', '=', which.personId)
  return Number((await update.executeTakeFirst()).numUpdatedRows)
}

export interface AskRow {
  id: number
  candidateId: number
  personId: number
  name: string
  pseudonym: string | null
  role: Role | null
  askedBy: string
  askedByPseudonym: string | null
  note: string | null
  askedAt: IsoTime
  answeredAt: IsoTime | null
  withdrawnAt: IsoTime | null
  /** Whether the person could have seen the others' grades before answering: shown to them, or a lead's by role. */
  informed: 0 | 1
}

function asksWithNames(db: Kysely<DB>) {
  return db
    .selectFrom('asked_look')
    .innerJoin('person', 'person.id', 'asked_look.person_id')
    .innerJoin('person as asker', 'asker.id', 'asked_look.asked_by')
    .leftJoin('grade', 'grade.id', 'asked_look.grade_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'asked_look.person_id')
        .onRef('membership.campaign_id', '=', 'asked_look.campaign_id'),
    )
    .leftJoin('membership as asking', (join) =>
      join
        .onRef('asking.person_id', '=', 'asked_look.asked_by')
        .onRef('asking.campaign_id', '=', 'asked_look.campaign_id'),
    )
    .select([
      'asked_look.id',
      'asked_look.candidate_id as candidateId',
      'asked_look.person_id as personId',
      'person.name',
      'membership.pseudonym',
      'membership.role',
      'asker.name as askedBy',
      'asking.pseudonym as askedByPseudonym',
      'asked_look.note',
      'asked_look.asked_at as askedAt',
      'grade.given_at as answeredAt',
      'asked_look.withdrawn_at as withdrawnAt',
    ])
    .select(
      sql<0 | 1>`membership.role = 'lead' or exists (
        select 1 from judgement_shown shown where shown.candidate_id = asked_look.candidate_id
          and shown.person_id = asked_look.person_id and shown.at <= grade.given_at)`.as('informed'),
    )
}

/** Every ask of a candidate, oldest first. */
export async function listAsksOf(db: Kysely<DB>, candidateId: number): Promise<AskRow[]> {
  return asksWithNames(db).where('asked_look.candidate_id', '=', candidateId).orderBy('asked_look.id').execute()
}

/** The ask of this campaign by its number, whatever became of it. */
export async function findAsk(db: Kysely<DB>, campaignId: number, id: number): Promise<AskRow | null> {
  const row = await asksWithNames(db)
    .where('asked_look.campaign_id', '=', campaignId)
    .where('asked_look.id', '=', id)
    .executeTakeFirst()
  return row ?? null
}

export interface OpenAskRow extends AskRow {
  candidate: string
}

/** What waits in a campaign, longest waiting first. */
export async function listOpenAsks(db: Kysely<DB>, campaignId: number): Promise<OpenAskRow[]> {
  return asksWithNames(db)
    .innerJoin('candidate', 'candidate.id', 'asked_look.candidate_id')
    .select('candidate.name as candidate')
    .where('asked_look.campaign_id', '=', campaignId)
    .where('asked_look.grade_id', 'is', null)
    .where('asked_look.withdrawn_at', 'is', null)
    .orderBy('asked_look.id')
    .execute()
}

export interface AskedCandidate {
  id: number
  name: string
  /** ICRS degrees */
  raDeg: number | null
  decDeg: number | null
  askId: number
  askedBy: string
  note: string | null
}

/** The candidates that this person was asked to look at and that have pictures, longest asked first. */
export async function listAskedCandidates(
  db: Kysely<DB>,
  asker: { campaignId: number; personId: number },
  limit: number,
): Promise<AskedCandidate[]> {
  return openAsks(db)
    .innerJoin('candidate', 'candidate.id', 'asked_look.candidate_id')
    .innerJoin('person', 'person.id', 'asked_look.asked_by')
    .select([
      'candidate.id',
      'candidate.name',
      'candidate.ra_deg as raDeg',
      'candidate.dec_deg as decDeg',
      'asked_look.id as askId',
      'person.name as askedBy',
      'asked_look.note',
    ])
    .where('asked_look.campaign_id', '=', asker.campaignId)
    .where('asked_look.person_id', '=', asker.personId)
    .where('candidate.imaged_at', 'is not', null)
    .orderBy('asked_look.id')
    .limit(limit)
    .execute()
}

/** How many looks wait for this person, and how many of their answers took no place of the wanted number. */
export async function countAsks(
  db: Kysely<DB>,
  { campaignId, personId }: { campaignId: number; personId: number },
): Promise<{ open: number; beside: number }> {
  return db
    .selectFrom('asked_look')
    .leftJoin('grade', 'grade.id', 'asked_look.grade_id')
    .select((e) => [
      e.fn
        .countAll<number>()
        .filterWhere('asked_look.grade_id', 'is', null)
        .filterWhere('asked_look.withdrawn_at', 'is', null)
        .as('open'),
      e.fn.countAll<number>().filterWhere('grade.occasion', '=', 'asked').as('beside'),
    ])
    .where('asked_look.campaign_id', '=', campaignId)
    .where('asked_look.person_id', '=', personId)
    .executeTakeFirstOrThrow()
}

export interface AskableRow {
  personId: number
  name: string
  email: string | null
  role: Role
  /** Their answer that counts now. */
  grade: GradeLetter | null
  /** The others' judgement of this candidate has been shown to them. */
  shown: 0 | 1
  asked: 0 | 1
  /** Left out of the consensus now: a look of theirs would not count. */
  leftOut: 0 | 1
}

/** Everybody in the campaign who may grade, as they stand to this candidate, by name. */
export async function listAskable(db: Kysely<DB>, campaignId: number, candidateId: number): Promise<AskableRow[]> {
  return db
    .selectFrom('membership')
    .innerJoin('person', 'person.id', 'membership.person_id')
    .select(['person.id as personId', 'person.name', 'person.email', 'membership.role'])
    .select([
      sql<GradeLetter | null>`(select grade.grade from grade where grade.candidate_id = ${candidateId}
        and grade.person_id = person.id and grade.occasion in ('first', 'asked') order by grade.id desc limit 1)`.as(
        'grade',
      ),
      sql<0 | 1>`exists (select 1 from judgement_shown shown
        where shown.candidate_id = ${candidateId} and shown.person_id = person.id)`.as('shown'),
      sql<0 | 1>`exists (select 1 from asked_look ask where ask.candidate_id = ${candidateId}
        and ask.person_id = person.id and ask.grade_id is null and ask.withdrawn_at is null)`.as('asked'),
      sql<0 | 1>`coalesce((select decided.left_out from left_out decided where decided.campaign_id = ${campaignId}
        and decided.person_id = person.id order by decided.id desc limit 1), 0)`.as('leftOut'),
    ])
    .where('membership.campaign_id', '=', campaignId)
    .where('membership.ended_at', 'is', null)
    .where('membership.role', '!=', 'viewer')
    .orderBy('person.name')
    .execute()
}
