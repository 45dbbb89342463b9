import 'server-only'
import type { Kysely } from 'kysely'
import {
  findFileByContent,
  findFileInUse,
  insertFile,
  releaseDuplicates,
  replaceOthersOfName,
  setFileColumns,
  setFileStored,
} from '@/db/queries/intake'
import { hasFileOfName } from '@/db/queries/duplicates'
import { clearPaintedFileName } from '@/db/queries/painted-names'
import type { DB } from '@/db/schema'
import type { FileFate, FileRow } from '@/db/schema/intake'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import type { StoredBlob } from '@/lib/platform/storage/blob-store'
import { kindOfName } from './file-name'
import { requestReading, requestUnpacking } from './request-reading'
import { areElsewhere } from './same-bytes'

/** Whose delivery a file is part of. */
export interface Delivery {
  campaignId: number
  personId: number
  /** Asked for only where a row is added. */
  batchId: (db: Kysely<DB>) => Promise<number>
  archiveId?: number
  /** A lead's choice of a manifest's columns. */
  columns?: FileRow['columns']
}

const IN_WORDS: Record<FileFate, string> = {
  stored: 'waiting to be read',
  read: 'read',
  imaged: 'imaged',
  duplicate: 'a duplicate itself',
  refused: 'refused',
}

/**
 * The row of a file whose bytes are on disk; reading it is asked for in the same transaction, in which this is called. The same
 * bytes under the same name change nothing; other bytes under an old name replace that file once they are read. The bytes of a
 * file in use under a new name are a duplicate of it, unless names or manifests tell another candidate or band.
 */
export async function keepFile(db: Kysely<DB>, delivery: Delivery, name: string, blob: StoredBlob): Promise<FileRow> {
  const same = await findFileByContent(db, delivery.campaignId, blob.sha256, name)
  return same ? keepSame(db, delivery, same) : keepNew(db, delivery, name, blob)
}

const requestWork = (db: Kysely<DB>, campaignId: number, kind: FileRow['kind']): Promise<void> =>
  kind === 'archive' ? requestUnpacking(db, campaignId) : requestReading(db, campaignId)

async function keepSame(db: Kysely<DB>, delivery: Delivery, same: FileRow): Promise<FileRow> {
  const now = isoTime()
  const { columns } = delivery
  const otherColumns = columns !== undefined && columns !== same.columns
  if (same.replaced_by === null && same.fault !== 'lost' && !otherColumns) {
    const why = same.reason ? `: ${same.reason}` : '.'
    const reason = `'${same.name}' with the same bytes is here already and is ${IN_WORDS[same.fate]}${why}`
    return { ...same, fate: 'duplicate', reason }
  }
  // An earlier version is wanted again, bytes that the server had lost are back, or a manifest is to be read by other columns.
  const reason = same.replaced_by === null ? null : 'An earlier version of this name, in use again.'
  await setFileStored(db, same.id, reason, now)
  if (otherColumns) await setFileColumns(db, same.id, columns)
  await releaseDuplicates(db, await replaceOthersOfName(db, delivery.campaignId, same.name, same.id, now), now)
  await requestWork(db, delivery.campaignId, same.kind)
  return { ...same, fate: 'stored', fault: null, reason, replaced_by: null }
}

/** The file that this one repeats; null where it corrects the one of its own name or belongs to another place. */
async function findTwin(
  db: Kysely<DB>,
  campaignId: number,
  name: string,
  sha256: string,
  kind: FileRow['kind'],
): Promise<FileRow | null> {
  const twin = await findFileInUse(db, campaignId, sha256, kind)
  if (!twin || (await hasFileOfName(db, campaignId, name))) return null
  const [isElsewhere] = kind === 'fits' ? await areElsewhere(db, campaignId, [{ name, twin }]) : [false]
  return isElsewhere ? null : twin
}

async function keepNew(db: Kysely<DB>, delivery: Delivery, name: string, blob: StoredBlob): Promise<FileRow> {
  const now = isoTime()
  const { campaignId, personId } = delivery
  const kind = kindOfName(name)
  await clearPaintedFileName(db, campaignId, name)
  const twin = await findTwin(db, campaignId, name, blob.sha256, kind)
  const row = await insertFile(db, {
    campaignId,
    batchId: await delivery.batchId(db),
    name,
    kind,
    ...blob,
    fate: twin ? 'duplicate' : 'stored',
    reason: twin ? `The same bytes as '${twin.name}'.` : null,
    duplicateOf: twin?.id ?? null,
    personId,
    archiveId: delivery.archiveId,
    columns: delivery.columns,
    now,
  })
  if (twin) return row
  const replaced = await replaceOthersOfName(db, campaignId, name, row.id, now)
  await releaseDuplicates(db, replaced, now)
  if (replaced.length > 0) {
    const detail = { file: row.id, replaced }
    await recordEvent(db, { personId, campaignId, action: 'intake.file-replaced', subject: name, detail })
  }
  await requestWork(db, campaignId, kind)
  return row
}
