import 'server-only'
import type { Kysely } from 'kysely'
import { findList, findListOfFile, insertList } from '@/db/queries/reference-lists'
import type { DB } from '@/db/schema'
import type { ListMapping } from '@/db/schema/matching'
import { fromJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import { invalid, notFound } from '@/lib/platform/problems/problem'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { storeBody, type Body } from '@/lib/work/intake/store-body'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { ListReader } from './list-reader'
import type { ListLook } from './read-list'

const DEFAULT_RADIUS_ARCSEC = 2

/**
 * Keeps the file of a list, which a lead then maps and takes in. The same bytes again are the list that is here already.
 * @throws Problem 422 where the file is no list; the list stays away then. 400, 411, 413 and 507 of `storeBody`.
 */
export async function uploadList(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  tools: { store: BlobStore; reader: ListReader },
  { name, body }: { name: string; body: Body },
): Promise<{ id: number; isNew: boolean }> {
  const { campaign, viewer } = permit
  const blob = await storeBody(tools.store, body)
  const here = await findListOfFile(db, campaign.id, blob.sha256)
  if (here !== null) return { id: here, isNew: false }
  const task = { path: tools.store.pathOf(blob.sha256), bytes: blob.bytes, mapping: null }
  const look = await tools.reader.look(task)
  if ('fault' in look) throw invalid(look.fault)
  const fileName = name.replace(/^.*[\\/]/, '').slice(0, 200) || 'list'
  const now = isoTime()
  return db.transaction().execute(async (transaction) => {
    const meanwhile = await findListOfFile(transaction, campaign.id, blob.sha256)
    if (meanwhile !== null) return { id: meanwhile, isNew: false }
    const id = await insertList(transaction, {
      campaign_id: campaign.id,
      name: fileName.replace(/\.(csv|tsv|txt|xml|vot|votable)$/i, '').slice(0, 120),
      source: '',
      list_date: '',
      file_name: fileName,
      format: look.format,
      sha256: blob.sha256,
      bytes: blob.bytes,
      mapping: null,
      radius_arcsec: DEFAULT_RADIUS_ARCSEC,
      state: 'draft',
      reason: null,
      uploaded_by: viewer.id,
      uploaded_at: now,
      state_since: now,
    })
    const event = { personId: viewer.id, campaignId: campaign.id, subject: fileName }
    await recordEvent(transaction, { ...event, action: 'matching.list-uploaded', detail: { list: id, ...blob } })
    return { id, isNew: true }
  })
}

/** The first rows of a list as they would be read: by these columns, else by those chosen before, else by what they look like. */
export async function lookAtUpload(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  tools: { store: BlobStore; reader: ListReader },
  listId: number,
  chosen: ListMapping | null,
): Promise<ListLook> {
  const list = await findList(db, permit.campaign.id, listId)
  if (!list) throw notFound('list')
  const mapping = chosen ?? (list.mapping === null ? null : fromJson(list.mapping))
  const look = await tools.reader.look({ path: tools.store.pathOf(list.sha256), bytes: list.bytes, mapping })
  if ('fault' in look) throw invalid(look.fault)
  return look
}
