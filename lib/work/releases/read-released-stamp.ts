import 'server-only'
import type { Kysely } from 'kysely'
import { findReleaseEntry } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { notFound } from '@/lib/platform/problems/problem'
import type { BlobStore } from '@/lib/platform/storage/blob-store'

/**
 * A picture by its hash, where this entry of this release has it: a hash alone opens nothing.
 * @throws Problem 404, alike for an unknown entry, for another entry's picture and for one that is not there.
 */
export async function readReleasedStamp(
  db: Kysely<DB>,
  blobs: BlobStore,
  releaseId: number,
  entryKey: string,
  sha256: string,
): Promise<Uint8Array> {
  const entry = await findReleaseEntry(db, releaseId, entryKey)
  const hashes = entry ? [entry.thumbnail, ...Object.values(fromJson(entry.stamps))] : []
  if (!hashes.includes(sha256) || !(await blobs.has(sha256))) throw notFound('stamp of this release')
  return blobs.read(sha256)
}
