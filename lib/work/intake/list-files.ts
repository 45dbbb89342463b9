import 'server-only'
import type { Kysely } from 'kysely'
import { z } from 'zod'
import { listUnfinishedBatches } from '@/db/queries/batches'
import { countCandidates } from '@/db/queries/campaigns'
import { listPlanesOfFiles, type PlaneOfFile } from '@/db/queries/cutouts'
import { countFates, listFiles, type ListedFile } from '@/db/queries/intake'
import { listCampaignJobs } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { invalid } from '@/lib/platform/problems/problem'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { DeliveredFile, FilePage, IntakeSummary } from './delivered-file'
import { nameMatcher, type NameMatcher } from './name-pattern'

export const FileListQuery = z
  .object({
    limit: z.coerce.number().int().min(1).max(1000).default(500),
    cursor: z.string().max(40).optional(),
    fate: z.enum(['stored', 'read', 'imaged', 'duplicate', 'refused']).optional(),
    search: z.string().max(255).optional(),
    /** `refused` puts refused files before all others; else files come in the order of their delivery. */
    first: z.enum(['refused']).optional(),
  })
  .strict()
export type FileListQuery = z.output<typeof FileListQuery>

interface Place {
  /** The part of the list: all in one, or the refused ones and then the others. */
  part: 'all' | 'refused' | 'others'
  afterId: number
}

function placeOf(query: FileListQuery): Place {
  const begin: Place = { part: query.first && !query.fate ? 'refused' : 'all', afterId: 0 }
  if (query.cursor === undefined) return begin
  const match = /^(all|refused|others)-(\d{1,15})$/.exec(query.cursor)
  if (!match) throw invalid('The cursor is not one that this list gave. Begin again without it.')
  return { part: match[1] as Place['part'], afterId: Number(match[2]) }
}

/** A page of a campaign's delivered files with the counts of all of them. */
export async function listDeliveredFiles(
  db: Kysely<DB>,
  permit: CampaignPermit<'lead'>,
  query: FileListQuery,
): Promise<FilePage> {
  const { campaign } = permit
  const [{ rows, nextCursor }, summary] = await Promise.all([page(db, campaign.id, query), intakeSummary(db, permit)])
  const planes = new Map<number, PlaneOfFile[]>()
  for (const plane of await listPlanesOfFiles(
    db,
    rows.map(({ id }) => id),
  )) {
    planes.set(plane.fileId, [...(planes.get(plane.fileId) ?? []), plane])
  }
  const bands = fromJson(campaign.bands)
  const matcher = nameMatcher(campaign.name_pattern, bands)
  return { files: rows.map((row) => fileOf(row, planes.get(row.id) ?? [], matcher, bands)), nextCursor, summary }
}

async function page(
  db: Kysely<DB>,
  campaignId: number,
  query: FileListQuery,
): Promise<{ rows: ListedFile[]; nextCursor: string | null }> {
  const rows: ListedFile[] = []
  let place = placeOf(query)
  for (;;) {
    const wanted = query.limit - rows.length
    const filter = { search: query.search, afterId: place.afterId, limit: wanted + 1 }
    const fates =
      place.part === 'refused'
        ? { fate: 'refused' as const }
        : { fate: query.fate, notFate: place.part === 'others' ? ('refused' as const) : undefined }
    const found = await listFiles(db, campaignId, { ...filter, ...fates })
    rows.push(...found.slice(0, wanted))
    if (found.length > wanted) return { rows, nextCursor: `${place.part}-${rows.at(-1)?.id ?? place.afterId}` }
    if (place.part !== 'refused') return { rows, nextCursor: null }
    place = { part: 'others', afterId: 0 }
    if (rows.length === query.limit) return { rows, nextCursor: 'others-0' }
  }
}

function fileOf(row: ListedFile, planes: PlaneOfFile[], matcher: NameMatcher, bands: string[]): DeliveredFile {
  const told = row.kind === 'fits' && planes.length === 0 ? matcher.match(row.name) : null
  const replaced = row.replacedBy !== null && planes.length === 0
  return {
    id: row.id,
    name: row.name,
    kind: row.kind,
    sha256: row.sha256,
    bytes: row.bytes,
    fate: row.fate,
    fault: row.fault,
    reason: replaced ? 'A newer file of this name has taken its place.' : row.reason,
    candidate: planes[0]?.candidate ?? told?.candidate ?? null,
    candidateId: planes[0]?.candidateId ?? null,
    bands:
      planes.length > 0
        ? bands.filter((band) => planes.some((plane) => plane.band === band))
        : told?.band
          ? [told.band]
          : [],
    batch: row.batch,
    replaced,
    createdAt: row.createdAt,
    updatedAt: row.updatedAt,
  }
}

export async function intakeSummary(db: Kysely<DB>, { campaign }: CampaignPermit<'lead'>): Promise<IntakeSummary> {
  const fates = await countFates(db, campaign.id)
  const counts = await countCandidates(db, campaign.id)
  const jobs = (await listCampaignJobs(db, campaign.id)).filter(
    ({ kind }) => kind === JOB.readFiles || kind === JOB.unpackArchives || kind === JOB.imageCandidates,
  )
  const unfinished = jobs.filter(({ state }) => state !== 'failed')
  const running = unfinished.find(({ state }) => state === 'running')
  // A job that failed and whose work another has done since is of no interest.
  const failed = unfinished.find(({ error }) => error !== null) ?? (fates.stored > 0 ? jobs[0] : undefined)
  return {
    files: Object.values(fates).reduce((sum, count) => sum + count, 0),
    ...fates,
    candidates: counts.candidates,
    candidatesImaged: counts.imaged,
    working: unfinished.length > 0,
    progress:
      running && running.total > 0
        ? {
            what: running.kind === JOB.unpackArchives ? 'unpacking' : 'reading',
            done: running.done,
            total: running.total,
          }
        : null,
    fault: failed?.error ?? null,
    batches: await listUnfinishedBatches(db, campaign.id),
  }
}
