import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { listFilesByName, type FileOfName } from '@/db/queries/known-files'
import { hasManifestRows, listManifestRowsOfBases } from '@/db/queries/manifests'
import type { DB } from '@/db/schema'
import type { FileFate } from '@/db/schema/intake'
import { fromJson } from '@/db/schema/values'
import { Problem } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { baseName, cleanFileName } from './file-name'
import { groupBy } from './group-by'
import { manifestFacts, type ManifestFacts } from './manifest-facts'
import { matchName } from './match-name'
import { nameMatcher } from './name-pattern'

/** 5,000 names are about 400 KiB: a folder of 30,000 files is six requests. */
export const LookUp = z.strictObject({
  look: z.array(z.strictObject({ name: z.string().max(1000) })).max(5000, 'Ask for at most 5,000 files at a time.'),
})

/** What the server has under a name, so that whoever sends a folder again can leave out what is here. */
export interface KnownFile {
  sha256: string
  bytes: number
  fate: FileFate
}

export interface LookedUp {
  /** One for each name, in their order; null where nothing of that name is here, or its bytes are lost. */
  files: (KnownFile | null)[]
  /** What manifests here say of each; null where none names it. */
  told: (ToldOfFile | null)[]
}

export interface ToldOfFile extends Pick<ManifestFacts, 'raDeg' | 'decDeg' | 'truth'> {
  candidate: string | null
  band: string | null
}

const NAMES_PER_QUERY = 1000

export async function lookUpFiles(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  { look }: z.output<typeof LookUp>,
): Promise<LookedUp> {
  const campaignId = permit.campaign.id
  const bands = fromJson(permit.campaign.bands)
  const matcher = nameMatcher(permit.campaign.name_pattern, bands)
  const anyManifest = await hasManifestRows(db, campaignId)
  const answer: LookedUp = { files: [], told: [] }
  for (let start = 0; start < look.length; start += NAMES_PER_QUERY) {
    const names = look.slice(start, start + NAMES_PER_QUERY).map(({ name }) => cleanOrNull(name))
    const wanted = names.filter((name) => name !== null)
    const known = new Map((await listFilesByName(db, campaignId, wanted)).map((file) => [file.name, file]))
    const bases = anyManifest ? [...new Set(wanted.map(baseName))] : []
    const byBase = groupBy(await listManifestRowsOfBases(db, campaignId, bases), (row) =>
      (row.file_base ?? '').toLowerCase(),
    )
    for (const name of names) {
      answer.files.push(name === null ? null : usable(known.get(name)))
      const rows = name === null ? [] : (byBase.get(baseName(name).toLowerCase()) ?? [])
      const match = name === null || rows.length === 0 ? null : matchName(name, matcher, rows, bands)
      if (match === null || match.rows.length === 0) answer.told.push(null)
      else {
        const { raDeg, decDeg, truth } = manifestFacts(match.rows)
        answer.told.push({ candidate: match.candidate, band: match.band, raDeg, decDeg, truth })
      }
    }
  }
  return answer
}

const usable = (file: FileOfName | undefined): KnownFile | null =>
  file === undefined || file.fault === 'lost' ? null : { sha256: file.sha256, bytes: file.bytes, fate: file.fate }

function cleanOrNull(name: string): string | null {
  try {
    return cleanFileName(name)
  } catch (error) {
    if (error instanceof Problem) return null
    throw error
  }
}
