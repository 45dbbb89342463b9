import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import type { FileFate, FileRow } from '@/db/schema/intake'
import { fromJson } from '@/db/schema/values'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { commitTogether } from './commit-together'
import { deliveryBatch } from './delivery-batch'
import { kindOfName } from './file-name'
import { keepFile } from './keep-file'
import { nameMatcher } from './name-pattern'
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

/** Takes one delivered file. The bytes are on disk before the row is written. */
export async function receiveFile(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  store: BlobStore,
  input: { name: string; body: Body; batch?: string; columns?: FileRow['columns'] },
): Promise<ReceivedFile> {
  const blob = await storeBody(store, input.body, kindOfName(input.name))
  const delivery = {
    campaignId: permit.campaign.id,
    personId: permit.viewer.id,
    batchId: (transaction: Kysely<DB>) => deliveryBatch(transaction, permit, input.batch),
    columns: input.columns,
  }
  const row = await commitTogether(db, (transaction) => keepFile(transaction, delivery, input.name, blob))
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
