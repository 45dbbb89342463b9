import 'server-only'
import type { Kysely } from 'kysely'
import { insertAllDue } from '@/db/queries/matching'
import { deleteUnusedList, findList, isBeingRead, setMatchRadius, updateList } from '@/db/queries/reference-lists'
import type { DB } from '@/db/schema'
import type { ListMapping, ReferenceList } from '@/db/schema/matching'
import { toJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { requestMatching } from '@/lib/platform/jobs/request-matching'
import { conflict, notFound } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { ListDetails } from './list-details'

type Lead = CampaignPermit<'lead'>

/** One whose reading was given up (the server went down each time) can be taken in again or retired. */
async function requireList(db: Kysely<DB>, permit: Lead, listId: number): Promise<ReferenceList> {
  const list = await findList(db, permit.campaign.id, listId)
  if (!list) throw notFound('list')
  if (await isBeingRead(db, list)) {
    throw conflict('being-read', `${list.name} is being read. Wait until it is there, then change it.`)
  }
  return list
}

const columnsOf = ({ name, source, listDate, radiusArcsec, keepsOutOfNew }: ListDetails) => ({
  name,
  source,
  list_date: listDate,
  radius_arcsec: radiusArcsec,
  keeps_out_of_new: keepsOutOfNew ? (1 as const) : (0 as const),
})

const record = (db: Kysely<DB>, { viewer, campaign }: Lead, action: string, list: string, detail: object) =>
  recordEvent(db, { personId: viewer.id, campaignId: campaign.id, action, subject: list, detail: { ...detail } })

/** Asks for the list to be matched with every candidate. */
export async function requestListMatching(db: Kysely<DB>, list: { id: number; campaignId: number }): Promise<void> {
  const { id: listId, campaignId } = list
  const uniqueKey = `${JOB.matchList}:${listId}`
  await enqueueJob(db, { kind: JOB.matchList, campaignId, uniqueKey, payload: { listId } })
}

/**
 * Has a list read with these columns; what is wrong with it comes as the list's own reason, and file and choice stay. One in force
 * stays so, by the columns that it has, until the file has been looked through by the new ones.
 * @throws Problem 404; 409 `being-read`, `retired`.
 */
export async function takeInList(
  db: Kysely<DB>,
  permit: Lead,
  listId: number,
  input: { details: ListDetails; mapping: ListMapping },
): Promise<void> {
  const { details, mapping } = input
  const now = isoTime()
  await db.transaction().execute(async (transaction) => {
    const list = await requireList(transaction, permit, listId)
    if (list.state === 'retired') {
      throw conflict('retired', `${list.name} is retired. Bring it back before it is read again.`)
    }
    const isInForce = list.state === 'ready'
    const change = isInForce
      ? columnsOf(details)
      : { ...columnsOf(details), mapping: toJson(mapping), state: 'reading' as const, reason: null, state_since: now }
    await updateList(transaction, listId, ['draft', 'refused', 'ready', 'reading'], change)
    const uniqueKey = `${JOB.readList}:${listId}`
    const campaignId = permit.campaign.id
    await enqueueJob(transaction, {
      kind: JOB.readList,
      campaignId,
      uniqueKey,
      payload: isInForce ? { listId, mapping } : { listId },
    })
    await record(transaction, permit, 'matching.list-taken-in', details.name, { list: listId, mapping, ...details })
  })
}

/** Changes what is told of a list, its radius and whether it keeps its matches out of new lists. */
export async function changeList(db: Kysely<DB>, permit: Lead, listId: number, details: ListDetails): Promise<void> {
  await db.transaction().execute(async (transaction) => {
    const list = await requireList(transaction, permit, listId)
    await updateList(transaction, listId, [list.state], columnsOf(details))
    if (list.state === 'ready' && list.radius_arcsec !== details.radiusArcsec) {
      await requestListMatching(transaction, { id: listId, campaignId: permit.campaign.id })
    }
    await record(transaction, permit, 'matching.list-changed', details.name, { list: listId, ...details })
  })
}

/** A retired list labels nothing; it and its rows stay. */
export async function retireList(db: Kysely<DB>, permit: Lead, listId: number): Promise<{ name: string }> {
  return db.transaction().execute(async (transaction) => {
    const { name, state } = await requireList(transaction, permit, listId)
    // Of what was read in part nothing counts: it comes back as a draft.
    const unread = state === 'reading' ? { rows: 0, positions: 0 } : {}
    const change = { state: 'retired', state_since: isoTime(), ...unread } as const
    if (!(await updateList(transaction, listId, ['draft', 'refused', 'ready', 'reading'], change))) {
      throw conflict('retired', `${name} is retired already.`)
    }
    await record(transaction, permit, 'matching.list-retired', name, { list: listId })
    return { name }
  })
}

/** Takes away a list that was never in force, as after a wrong file; the record keeps that it was sent and thrown away. */
export async function discardList(db: Kysely<DB>, permit: Lead, listId: number): Promise<{ name: string }> {
  return db.transaction().execute(async (transaction) => {
    const { name, sha256 } = await requireList(transaction, permit, listId)
    if (!(await deleteUnusedList(transaction, listId))) {
      throw conflict('was-in-force', `${name} has been in force, so it stays on record. Retire it instead.`)
    }
    await record(transaction, permit, 'matching.list-discarded', name, { list: listId, sha256 })
    return { name }
  })
}

/** Candidates that came meanwhile are matched with it. One that was never read comes back as it was sent. */
export async function bringBackList(db: Kysely<DB>, permit: Lead, listId: number): Promise<{ name: string }> {
  return db.transaction().execute(async (transaction) => {
    const { name, positions, state } = await requireList(transaction, permit, listId)
    if (state !== 'retired') throw conflict('not-retired', `${name} is not retired, so there is nothing to bring back.`)
    const back = positions > 0 ? 'ready' : 'draft'
    await updateList(transaction, listId, ['retired'], { state: back, state_since: isoTime() })
    if (back === 'ready') await requestListMatching(transaction, { id: listId, campaignId: permit.campaign.id })
    await record(transaction, permit, 'matching.list-brought-back', name, { list: listId })
    return { name }
  })
}

/** How near two candidates must be to be proposed as one: all are matched again. */
export async function changeMatchRadius(db: Kysely<DB>, permit: Lead, radiusArcsec: number): Promise<void> {
  const { campaign } = permit
  await db.transaction().execute(async (transaction) => {
    await setMatchRadius(transaction, campaign.id, radiusArcsec)
    if (radiusArcsec > campaign.match_radius_arcsec) {
      await insertAllDue(transaction, campaign.id)
      await requestMatching(transaction, campaign.id)
    }
    await record(transaction, permit, 'matching.radius-changed', campaign.name, { radiusArcsec })
  })
}
