import 'server-only'
import type { Kysely } from 'kysely'
import { countDue } from '@/db/queries/matching'
import { countKnown, findList, listLists, listListWork, type ListOfCampaign } from '@/db/queries/reference-lists'
import type { DB } from '@/db/schema'
import type { ListMapping, ListState } from '@/db/schema/matching'
import { fromJson, type IsoTime } from '@/db/schema/values'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { forbidden, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'

export interface KnownList {
  id: number
  name: string
  source: string
  listDate: string
  fileName: string
  format: 'csv' | 'votable'
  bytes: number
  rows: number
  /** Rows that have a position. */
  positions: number
  radiusArcsec: number
  keepsOutOfNew: boolean
  state: ListState
  /** Why it was refused, or what to know of it; a sentence a line. */
  reason: string | null
  uploadedBy: string
  uploadedAt: IsoTime
  /** Candidates that it knows. */
  matched: number
  /** What is being done with it: rows read, candidates matched so far. */
  work: { does: 'reading' | 'matching'; done: number } | null
}

export interface KnownPage {
  lists: KnownList[]
  /** Candidates that some list in force knows. */
  known: number
  /** Candidates whose place has changed and that wait to be matched. */
  due: number
}

/**
 * The lists of known objects and how many candidates each knows. Leads and viewers.
 * @throws Problem 403 to a grader, whom the counts would tell of candidates that they have not judged.
 */
export async function knownPage(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<KnownPage> {
  if (permit.role === 'grader') throw forbidden('Known objects are shown to leads and viewers of this campaign.')
  const { id } = permit.campaign
  const kinds = [JOB.readList, JOB.matchList]
  const [lists, known, due, work] = [
    await listLists(db, id),
    await countKnown(db, id),
    await countDue(db, id),
    await listListWork(db, id, kinds),
  ]
  return { known, due, lists: lists.map((list) => toldList(list, permit.role === 'lead', work)) }
}

export interface KnownListWithMapping extends KnownList {
  mapping: ListMapping | null
}

/** One list, for the page on which a lead chooses its columns. @throws Problem 404 */
export async function knownList(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  listId: number,
): Promise<KnownListWithMapping> {
  const found = await findList(db, permit.campaign.id, listId)
  const page = found && (await knownPage(db, permit))
  const list = page?.lists.find(({ id }) => id === listId)
  if (!found || !list) throw notFound('list')
  return { ...list, mapping: found.mapping === null ? null : fromJson(found.mapping) }
}

function toldList(
  list: ListOfCampaign,
  isLead: boolean,
  work: readonly { kind: string; listId: number | null; done: number }[],
): KnownList {
  const own = work.find(({ listId }) => listId === list.id)
  const isStuck = list.state === 'reading' && own?.kind !== JOB.readList
  return {
    id: list.id,
    name: list.name,
    source: list.source,
    listDate: list.list_date,
    fileName: list.file_name,
    format: list.format,
    bytes: list.bytes,
    rows: list.rows,
    positions: list.positions,
    radiusArcsec: list.radius_arcsec,
    keepsOutOfNew: list.keeps_out_of_new === 1,
    state: isStuck ? 'refused' : list.state,
    reason: isStuck ? 'The server went down each time it was being read. Take it in again.' : list.reason,
    uploadedBy: isLead ? list.uploadedBy : 'a lead',
    uploadedAt: list.uploaded_at,
    matched: list.matched,
    work: own ? { does: own.kind === JOB.readList ? 'reading' : 'matching', done: own.done } : null,
  }
}
