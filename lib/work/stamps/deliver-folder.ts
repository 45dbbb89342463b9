import 'server-only'
import type { Kysely } from 'kysely'
import { createReadStream } from 'node:fs'
import { readdir, stat } from 'node:fs/promises'
import path from 'node:path'
import type { DB } from '@/db/schema'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { receiveFile, type ReceivedFile } from '@/lib/work/intake/receive-file'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { ImagingTools } from './campaign-work'
import { readFiles } from './read-files'

/** Delivers every file of a folder and its folders as uploads would, in the order of their names. For scripts. */
export async function deliverFolder(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  store: BlobStore,
  folder: string,
  batch?: string,
): Promise<ReceivedFile[]> {
  const entries = await readdir(folder, { recursive: true, withFileTypes: true })
  const paths = entries.filter((entry) => entry.isFile()).map((entry) => path.join(entry.parentPath, entry.name))
  const received: ReceivedFile[] = []
  for (const file of paths.sort()) {
    const body = { chunks: createReadStream(file), contentLength: String((await stat(file)).size) }
    received.push(await receiveFile(db, permit, store, { name: path.relative(folder, file), body, batch }))
  }
  return received
}

/** Reads and images what was delivered and returns when nothing is left to do, without waiting for more to come. For scripts. */
export async function readDelivered(tools: ImagingTools, campaignId: number): Promise<void> {
  await readFiles({ ...tools, quietMs: 0 }, campaignId, async () => {})
}
