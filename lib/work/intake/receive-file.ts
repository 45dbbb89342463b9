import 'server-only'
import type { Kysely } from 'kysely'
import {
  findFileByContent,
  findFileInUse,
  insertFile,
  releaseDuplicates,
  replaceOthersOfName,
  setFileStored,
} from '@/db/queries/intake'
import type { DB } from '@/db/schema'
import type { FileFate, FileRow } from '@/db/schema/intake'
import { fromJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import type { BlobStore, StoredBlob } from '@/lib/platform/storage/blob-store'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { deliveryBatch } from './delivery-batch'
import { isManifestName } from './file-name'
import { nameMatcher } from './name-pattern'
import { requestReading } from './request-reading'
import { storeBody, type Body } from './store-body'

export interface ReceivedFile {
  id: number
  name: string
  sha256: string
  bytes: number
  fate: FileFate
  reason: string | null
  /** What the name alone tells; a manifest or a header may tell otherwise. */
  candidate: string | null
  band: string | null
}

const IN_WORDS: Record<FileFate, string> = {
  stored: 'waiting to be read',
  read: 'read',
  imaged: 'imaged',
  duplicate: 'a duplicate itself',
  refused: 'refused',
}

/**
 * Takes one delivered file. The bytes are on disk before the row is written, and reading them is asked for in the same
 * transaction. The same bytes under the same name change nothing; under another name they are a duplicate of the file in use;
 * other bytes under an old name replace that file once they are read.
 */
export async function receiveFile(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  store: BlobStore,
  input: { name: string; body: Body; batch?: string },
): Promise<ReceivedFile> {
  const blob = await storeBody(store, input.body)
  const row = await db.transaction().execute((transaction) => keepRow(transaction, permit, input, blob))
  const match = row.kind === 'fits' ? matchOf(permit, row.name) : null
  return {
    id: row.id,
    name: row.name,
    sha256: row.sha256,
    bytes: row.bytes,
    fate: row.fate,
    reason: row.reason,
    candidate: match?.candidate ?? null,
    band: match?.band ?? null,
  }
}

const matchOf = ({ campaign }: CampaignPermit<'lead'>, name: string) =>
  nameMatcher(campaign.name_pattern, fromJson(campaign.bands)).match(name)

async function keepRow(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: { name: string; batch?: string },
  blob: StoredBlob,
): Promise<FileRow> {
  const campaignId = permit.campaign.id
  const same = await findFileByContent(db, campaignId, blob.sha256, input.name)
  return same ? keepSame(db, permit, same) : keepNew(db, permit, input, blob)
}

async function keepSame(db: Kysely<DB>, permit: CampaignPermit<'lead'>, same: FileRow): Promise<FileRow> {
  const now = isoTime()
  if (same.replaced_by === null && same.fault !== 'lost') {
    const why = same.reason ? `: ${same.reason}` : '.'
    const reason = `'${same.name}' with the same bytes is here already and is ${IN_WORDS[same.fate]}${why}`
    return { ...same, fate: 'duplicate', reason }
  }
  // An earlier version is wanted again, or bytes that the server had lost are back.
  const reason = same.replaced_by === null ? null : 'An earlier version of this name, in use again.'
  await setFileStored(db, same.id, reason, now)
  await releaseDuplicates(db, await replaceOthersOfName(db, permit.campaign.id, same.name, same.id, now), now)
  await requestReading(db, permit.campaign.id)
  return { ...same, fate: 'stored', fault: null, reason, replaced_by: null }
}

async function keepNew(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  input: { name: string; batch?: string },
  blob: StoredBlob,
): Promise<FileRow> {
  const now = isoTime()
  const campaignId = permit.campaign.id
  const kind = isManifestName(input.name) ? 'manifest' : 'fits'
  const twin = await findFileInUse(db, campaignId, blob.sha256, kind)
  const row = await insertFile(db, {
    campaignId,
    batchId: await deliveryBatch(db, permit, input.batch),
    name: input.name,
    kind,
    ...blob,
    fate: twin ? 'duplicate' : 'stored',
    reason: twin ? `The same bytes as '${twin.name}'.` : null,
    duplicateOf: twin?.id ?? null,
    personId: permit.viewer.id,
    now,
  })
  if (twin) return row
  const replaced = await replaceOthersOfName(db, campaignId, input.name, row.id, now)
  await releaseDuplicates(db, replaced, now)
  if (replaced.length > 0) {
    await recordEvent(db, {
      personId: permit.viewer.id,
      campaignId,
      action: 'intake.file-replaced',
      subject: input.name,
      detail: { file: row.id, replaced },
    })
  }
  await requestReading(db, campaignId)
  return row
}
