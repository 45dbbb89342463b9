import 'server-only'
import { listHeldPlanes } from '@/db/queries/cutouts'
import { releaseDuplicates, setFileFates, type WaitingFile } from '@/db/queries/intake'
import { hasManifestRows, listManifestRowsOfBases } from '@/db/queries/manifests'
import { isoTime } from '@/lib/platform/clock'
import { baseName } from '@/lib/work/intake/file-name'
import { matchName, type NameMatch } from '@/lib/work/intake/match-name'
import { groupBy } from '@/lib/work/intake/group-by'
import { noCandidate, type Refusal } from '@/lib/work/intake/refusals'
import type { CampaignWork, ImagingTools } from './campaign-work'
import type { MatchedFile } from './waiting-candidates'
import type { FileProbe } from './worker-tasks'

/** A file whose name tells no candidate: its header must. */
export interface UnmatchedFile {
  file: WaitingFile
  match: NameMatch
}

export interface MatchedPage {
  matched: MatchedFile[]
  unmatched: UnmatchedFile[]
  /** How many bands each candidate of `matched` has already, by name. */
  heldBands: Map<string, number>
  refused: number
}

export async function refuse(tools: ImagingTools, fileId: number, refusal: Refusal): Promise<void> {
  await tools.db.transaction().execute(async (transaction) => {
    await setFileFates(transaction, [fileId], { fate: 'refused', ...refusal, duplicateOf: null }, isoTime())
    await releaseDuplicates(transaction, [fileId], isoTime())
  })
}

/** Matches a page of stored files by manifest and name pattern. */
export async function matchPage(
  tools: ImagingTools,
  work: CampaignWork,
  files: readonly WaitingFile[],
): Promise<MatchedPage> {
  const { campaignId, matcher, bands } = work
  const bases = (await hasManifestRows(tools.db, campaignId))
    ? [...new Set(files.map(({ name }) => baseName(name)))]
    : []
  const byBase = groupBy(await listManifestRowsOfBases(tools.db, campaignId, bases), (row) =>
    (row.file_base ?? '').toLowerCase(),
  )
  const page: MatchedPage = { matched: [], unmatched: [], heldBands: new Map(), refused: 0 }
  for (const file of files) {
    const match = matchName(file.name, matcher, byBase.get(baseName(file.name).toLowerCase()) ?? [], bands)
    if (match.refusal) {
      await refuse(tools, file.id, match.refusal)
      page.refused++
    } else if (match.candidate === null) page.unmatched.push({ file, match })
    else page.matched.push({ file, candidate: match.candidate, band: match.band, rows: match.rows })
  }
  const names = [...new Set(page.matched.map(({ candidate }) => candidate))]
  for (const { candidate } of await listHeldPlanes(tools.db, campaignId, names)) {
    page.heldBands.set(candidate, (page.heldBands.get(candidate) ?? 0) + 1)
  }
  return page
}

const FILES_PER_PROBE = 32

/**
 * Opens files whose names tell no candidate. OBJECT names it, unless several files that hold all bands share it: then it names
 * the survey tile, and the file's own name stands for the candidate, as it does where there is no OBJECT.
 */
export async function matchByHeader(
  tools: ImagingTools,
  work: CampaignWork,
  files: readonly UnmatchedFile[],
): Promise<{ matched: MatchedFile[]; refused: number }> {
  const probes = await probeAll(tools, work, files)
  const shared = sharedObjects(probes)
  const matched: MatchedFile[] = []
  let refused = 0
  for (const { file, match } of files) {
    const probe = probes.get(file.id)
    const object = probe?.object ?? null
    const trusted = object !== null && !(probe?.manyBands && shared.has(object.name)) ? object.name : null
    const candidate = trusted ?? (probe?.manyBands ? baseName(file.name) : null)
    const refusal = probe?.refusal ?? (candidate === null ? noCandidate(file.name, work.matcher.pattern) : null)
    if (refusal) {
      await refuse(tools, file.id, refusal)
      refused++
    } else if (candidate !== null) matched.push({ file, candidate, band: match.band, rows: match.rows })
  }
  return { matched, refused }
}

async function probeAll(
  tools: ImagingTools,
  { bands }: CampaignWork,
  files: readonly UnmatchedFile[],
): Promise<Map<number, FileProbe>> {
  const tasks: UnmatchedFile[][] = []
  for (let start = 0; start < files.length; start += FILES_PER_PROBE)
    tasks.push(files.slice(start, start + FILES_PER_PROBE))
  const found = await Promise.all(
    tasks.map((part) =>
      tools.runner.probe({
        bands,
        files: part.map(({ file: { id, name, sha256 } }) => ({ id, name, sha256, path: tools.blobs.pathOf(sha256) })),
      }),
    ),
  )
  return new Map(found.flat().map((probe) => [probe.id, probe]))
}

function sharedObjects(probes: ReadonlyMap<number, FileProbe>): Set<string> {
  const seen = new Set<string>()
  const shared = new Set<string>()
  for (const { object, manyBands } of probes.values()) {
    if (!manyBands || object === null) continue
    if (seen.has(object.name)) shared.add(object.name)
    seen.add(object.name)
  }
  return shared
}
