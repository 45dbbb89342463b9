import 'server-only'
import type { Kysely } from 'kysely'
import { listPlanesOfFiles } from '@/db/queries/cutouts'
import { listDuplicates, setDuplicatesStored } from '@/db/queries/duplicates'
import { listManifestRowsOfBases } from '@/db/queries/manifests'
import { findCampaignById } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { baseName } from './file-name'
import { groupBy } from './group-by'
import { matchName, type NameMatch } from './match-name'
import { nameMatcher } from './name-pattern'

/** A file with the same bytes as another one, its twin. */
export interface Pair {
  name: string
  twin: { id: number; name: string }
}

/**
 * Whether names or manifests put a file at another candidate or band than its twin: then it is a cutout of its own, such as one
 * of two empty ones, and is read. Where nothing tells, it is the same cutout sent twice.
 */
export async function areElsewhere(db: Kysely<DB>, campaignId: number, pairs: readonly Pair[]): Promise<boolean[]> {
  const campaign = await findCampaignById(db, campaignId)
  if (!campaign || pairs.length === 0) return pairs.map(() => false)
  const bands = fromJson(campaign.bands)
  const matcher = nameMatcher(campaign.name_pattern, bands)
  const names = pairs.flatMap(({ name, twin }) => [name, twin.name])
  const rows = groupBy(await listManifestRowsOfBases(db, campaignId, [...new Set(names.map(baseName))]), (row) =>
    (row.file_base ?? '').toLowerCase(),
  )
  const ids = pairs.map(({ twin }) => twin.id)
  const planes = groupBy(await listPlanesOfFiles(db, ids), ({ fileId }) => String(fileId))
  const told = (name: string) => matchName(name, matcher, rows.get(baseName(name).toLowerCase()) ?? [], bands)
  return pairs.map(({ name, twin }) => {
    const read = planes.get(String(twin.id))
    const places = read ?? placeOf(told(twin.name))
    return isElsewhere(told(name), places)
  })
}

interface Place {
  candidate: string
  band: string | null
}

const placeOf = ({ candidate, band }: NameMatch): Place[] => (candidate === null ? [] : [{ candidate, band }])

function isElsewhere({ candidate, band, refusal }: NameMatch, places: readonly Place[]): boolean {
  if (candidate === null || refusal !== null || places.length === 0) return false
  if (places.every((place) => place.candidate !== candidate)) return true
  return band !== null && places.every((place) => place.band !== null && place.band !== band)
}

const FILES_PER_PAGE = 500

/** Duplicates that a new manifest or a new name pattern puts elsewhere than their twin are to be read. Returns how many. */
export async function readElsewhere(db: Kysely<DB>, campaignId: number): Promise<number> {
  let found = 0
  for (let afterId = 0; ;) {
    const files = await listDuplicates(db, campaignId, afterId, FILES_PER_PAGE)
    const last = files.at(-1)
    if (!last) return found
    afterId = last.id
    const elsewhere = await areElsewhere(db, campaignId, files)
    const ids = files.filter((_, index) => elsewhere[index]).map(({ id }) => id)
    await setDuplicatesStored(db, ids, isoTime())
    found += ids.length
  }
}
