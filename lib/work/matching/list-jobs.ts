import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { deleteSomeObjects, findListById, insertObjects, updateList } from '@/db/queries/reference-lists'
import type { DB } from '@/db/schema'
import type { ListMapping } from '@/db/schema/matching'
import { fromJson, toJson } from '@/db/schema/values'
import { unsynced } from '@/db/unsynced'
import { isoTime } from '@/lib/platform/clock'
import { giveWay } from '@/lib/platform/jobs/give-way'
import type { JobHandler } from '@/lib/platform/jobs/run-jobs'
import { log } from '@/lib/platform/log'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { blobs } from '@/lib/platform/storage/blobs'
import { requestListMatching } from './change-list'
import { MappingInput } from './list-mapping'
import { listReader, type ListReader } from './list-reader'
import { matchDue, matchList } from './match-candidates'
import type { Finding, ListRead } from './read-list'

/** With a mapping: a list in force that is to be read anew by it. */
const ListPayload = z.object({ listId: z.int().positive() })
const ReadPayload = ListPayload.extend({ mapping: MappingInput.optional() })
const CampaignPayload = z.object({ campaignId: z.int().positive() })

const MOST_DELETED = 2000
const TOLD_EVERY = 10
const LONGEST_REASON = 4000

type Progress = (done: number, total: number) => Promise<void>

/**
 * Reads a list that a lead has taken in: its rows are made anew in short transactions, and it comes into force in the last one. A kill
 * leaves it 'reading', and the job begins again from nothing, so that no row doubles.
 * @param anew how a list in force is to be read from now on: it keeps its rows and its columns until the file has been looked through
 * by the new ones, and where they cannot be read it stands as it was, with the reason.
 */
export async function readListRows(
  db: Kysely<DB>,
  tools: { store: BlobStore; reader: ListReader },
  listId: number,
  progress: Progress,
  anew: ListMapping | null = null,
): Promise<void> {
  const list = await findListById(db, listId)
  if (!list || list.mapping === null || !(list.state === 'reading' || (list.state === 'ready' && anew))) return
  const mapping = anew ?? fromJson(list.mapping)
  const clear = async () => {
    while ((await unsynced(db, (connection) => deleteSomeObjects(connection, listId, MOST_DELETED))) > 0)
      await giveWay()
  }
  let hasBegun = list.state === 'reading'
  if (hasBegun) await clear()
  const begin = async () => {
    const change = { state: 'reading', mapping: toJson(mapping), reason: null, rows: 0, positions: 0 } as const
    if (!(await updateList(db, listId, ['ready'], { ...change, state_since: isoTime() })))
      throw new Error('The list is not in force any more.')
    hasBegun = true
    await clear()
  }
  let parts = 0
  const keep = async (part: string) => {
    if (!hasBegun) await begin()
    await unsynced(db, (connection) => insertObjects(connection, listId, part))
    // The worker tells no end before it is there.
    if (parts++ % TOLD_EVERY === 0) await progress(1000 * parts, 0)
    await giveWay()
  }
  const task = { path: tools.store.pathOf(list.sha256), mapping }
  const read = await tools.reader.read(task, keep).catch((error: unknown): ListRead => {
    log.error({ list: listId, err: error }, 'list could not be read')
    const sentence =
      'The file could not be read to its end; what happened is in the server’s log. Try again, or send a smaller list.'
    return { refused: [{ sentence, stops: true }] }
  })
  if ('refused' in read && !hasBegun) {
    await db.transaction().execute(async (transaction) => {
      const reason = `The list stands as it was before. By the new choice: ${inWords(read.refused)}`
      const isInForce = await updateList(transaction, listId, ['ready'], { reason: reason.slice(0, LONGEST_REASON) })
      // Its radius may be another.
      if (isInForce) await requestListMatching(transaction, { id: listId, campaignId: list.campaign_id })
    })
    return
  }
  if ('refused' in read) {
    await clear()
    const change = { state: 'refused', reason: inWords(read.refused), rows: 0, positions: 0 } as const
    await updateList(db, listId, ['reading'], { ...change, state_since: isoTime() })
    return
  }
  await db.transaction().execute(async (transaction) => {
    const { rows, positions, findings } = read
    const change = { state: 'ready', rows, positions, reason: inWords(findings) || null } as const
    if (!(await updateList(transaction, listId, ['reading'], { ...change, state_since: isoTime() }))) return
    await requestListMatching(transaction, { id: listId, campaignId: list.campaign_id })
  })
}

/** What stops it first; a line each. */
const inWords = (findings: readonly Finding[]): string =>
  findings
    .toSorted((a, b) => Number(b.stops) - Number(a.stops))
    .map(({ sentence }) => sentence)
    .join('\n')
    .slice(0, LONGEST_REASON)

export const readListJob: JobHandler = ({ db, payload, progress }) => {
  const { listId, mapping = null } = ReadPayload.parse(payload)
  return readListRows(db, { store: blobs(), reader: listReader }, listId, progress, mapping)
}

export const matchListJob: JobHandler = async ({ db, payload, progress }) => {
  const list = await findListById(db, ListPayload.parse(payload).listId)
  if (list?.state === 'ready') await matchList(db, { id: list.id, campaignId: list.campaign_id }, progress)
}

export const matchCandidatesJob: JobHandler = ({ db, payload, progress }) =>
  matchDue(db, CampaignPayload.parse(payload).campaignId, progress)
