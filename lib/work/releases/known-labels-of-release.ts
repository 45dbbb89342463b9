import 'server-only'
import type { Kysely } from 'kysely'
import { listObjectMatches } from '@/db/queries/matching'
import type { DB } from '@/db/schema'
import type { ReleasedLabel } from '@/db/schema/releases'

/** What reference lists know these candidates as, nearest first, for the job that makes a release and has nobody's permit. */
export async function knownLabelsOfRelease(
  db: Kysely<DB>,
  candidateIds: readonly number[],
): Promise<Map<number, ReleasedLabel[]>> {
  const labels = new Map<number, ReleasedLabel[]>()
  for (const { candidateId, list, name, separationArcsec, decision } of await listObjectMatches(db, candidateIds)) {
    if (decision === 'different') continue
    labels.set(candidateId, [...(labels.get(candidateId) ?? []), { list, name, separationArcsec }])
  }
  return labels
}
