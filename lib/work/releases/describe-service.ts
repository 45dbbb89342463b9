import 'server-only'
import type { Kysely } from 'kysely'
import { listReleaseEntries, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { cautionsOf } from './cautions'
import { coneColumns } from './cone-columns'
import { availabilityDocument, capabilitiesDocument, tablesDocument, type VosiDocument } from './vosi-documents'

/** One of the documents in which the cone search of a release describes itself. @param at.address of the cone search. */
export async function describeService(
  db: Kysely<DB>,
  release: ReleaseRow,
  document: VosiDocument,
  at: { address: string; key: string | null; upSince: string },
): Promise<string> {
  if (document === 'availability') return availabilityDocument(at.upSince)
  if (document === 'tables') {
    const usual = new Set(coneColumns(2).map(({ name }) => name))
    const description = `${release.title}. ${cautionsOf(release).join(' ')}`
    return tablesDocument({ name: `release_${release.number}`, description }, coneColumns(3), usual)
  }
  const [first] = await listReleaseEntries(db, release.id, { after: 0, limit: 1 })
  const sample = first ? { raDeg: first.ra_deg, decDeg: first.dec_deg } : null
  return capabilitiesDocument({ ...at, sample })
}
