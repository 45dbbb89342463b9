import 'server-only'
import type { Kysely } from 'kysely'
import { countAsks, listAskable, listAsksOf, listOpenAsks, type AskRow } from '@/db/queries/asked-looks'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import type { Role } from '@/db/schema/people'
import type { IsoTime } from '@/db/schema/values'
import type { CampaignPermit } from '@/lib/work/people/permission'

/** A look that was asked of somebody, as a page shows it. */
export interface Ask {
  id: number
  /** Of whom, and who asked. */
  of: string
  by: string
  note: string | null
  at: IsoTime
  state: 'open' | 'answered' | 'withdrawn'
}

export interface OpenAsk extends Ask {
  personId: number
  candidateId: number
  candidate: string
}

/** Somebody a lead may ask, and what speaks against it. */
export interface Askable {
  personId: number
  name: string
  role: Role
  grade: GradeLetter | null
  /** Has been shown the others' grades, so that another look would not be independent. Leads see them by role, and may be asked. */
  shown: boolean
  asked: boolean
  /** Left out of the consensus: a look of theirs would not count. */
  leftOut: boolean
}

const stateOf = (row: AskRow): Ask['state'] => (row.answeredAt ? 'answered' : row.withdrawnAt ? 'withdrawn' : 'open')

/** The looks asked at a candidate, oldest first: with names for leads, pseudonyms for everybody else. */
export async function asksOf(db: Kysely<DB>, permit: CampaignPermit<'read'>, candidateId: number): Promise<Ask[]> {
  const named = permit.role === 'lead'
  return (await listAsksOf(db, candidateId)).map((row) => ({
    id: row.id,
    of: named ? row.name : (row.pseudonym ?? 'a member'),
    by: named ? row.askedBy : (row.askedByPseudonym ?? 'a lead'),
    note: row.note,
    at: row.askedAt,
    state: stateOf(row),
  }))
}

/** Who has answered an asked look at the candidate, and whether they could see the others' grades before: shown, or a lead's by role. */
export async function answeredPeople(db: Kysely<DB>, candidateId: number): Promise<Map<number, { informed: boolean }>> {
  const rows = await listAsksOf(db, candidateId)
  const people = new Map<number, { informed: boolean }>()
  for (const { personId, answeredAt, informed } of rows) {
    if (answeredAt === null) continue
    people.set(personId, { informed: informed === 1 || people.get(personId)?.informed === true })
  }
  return people
}

/** Everybody whom a lead could ask for a look at this candidate. */
export async function askableAt(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  candidateId: number,
): Promise<Askable[]> {
  const rows = await listAskable(db, permit.campaign.id, candidateId)
  return rows.map(({ personId, name, role, grade, shown, asked, leftOut }) => ({
    personId,
    name,
    role,
    grade,
    shown: shown === 1,
    asked: asked === 1,
    leftOut: leftOut === 1,
  }))
}

/** Looks that wait for an answer in the campaign, longest waiting first. */
export async function openAsks(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<OpenAsk[]> {
  return (await listOpenAsks(db, permit.campaign.id)).map((row) => ({
    id: row.id,
    of: row.name,
    by: row.askedBy,
    note: row.note,
    at: row.askedAt,
    state: 'open' as const,
    personId: row.personId,
    candidateId: row.candidateId,
    candidate: row.candidate,
  }))
}

/** The open look at a candidate that the person is asked for, with who asks by name, as the mail says it. */
export async function askOfMe(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateId: number,
): Promise<{ by: string; note: string | null } | null> {
  const rows = await listAsksOf(db, candidateId)
  const open = rows.find((row) => row.personId === permit.viewer.id && stateOf(row) === 'open')
  return open ? { by: open.askedBy, note: open.note } : null
}

/** How many looks are asked of the person who asks. */
export async function askedOfMe(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<number> {
  return (await countAsks(db, { campaignId: permit.campaign.id, personId: permit.viewer.id })).open
}
