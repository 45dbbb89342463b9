import 'server-only'
import type { Kysely } from 'kysely'
import { listCandidateNames, listFilesOfCandidates, upsertCandidates } from '@/db/queries/cutouts'
import { listReplacedBy } from '@/db/queries/duplicates'
import type { NewFileProblem } from '@/db/queries/file-problems'
import {
  listManifestRows,
  listManifestRowsOfBases,
  listManifestRowsOfCandidates,
  listToldPlanes,
  type ToldPlane,
} from '@/db/queries/manifests'
import { findCampaignById } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import type { ManifestRow } from '@/db/schema/intake'
import { fromJson } from '@/db/schema/values'
import { imageCentre } from '@/lib/science/sky/image-centre'
import type { Wcs } from '@/lib/science/sky/wcs'
import { isoTime } from '@/lib/platform/clock'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { requestMatching } from '@/lib/platform/jobs/request-matching'
import { baseName } from './file-name'
import { giveNamesUp } from './give-names-up'
import { groupBy } from './group-by'
import { manifestFacts, type ManifestFacts } from './manifest-facts'
import { rowsOfFile } from './match-name'
import { tellTruths } from './tell-truths'

const PER_PAGE = 500

/**
 * Gives every candidate that a manifest or the one it replaces tells of, by name or by file, the facts that manifests in force
 * and the headers of its images tell now: what a correction no longer says is withdrawn. A designation is given once and
 * stays; where its candidate has moved, that is returned in words.
 */
export async function retellFacts(db: Kysely<DB>, campaignId: number, manifestId: number): Promise<NewFileProblem[]> {
  const campaign = await findCampaignById(db, campaignId)
  const bands = campaign ? fromJson(campaign.bands) : []
  const names = await namesTold(db, campaignId, manifestId)
  const problems: NewFileProblem[] = []
  for (let start = 0; start < names.length; start += PER_PAGE) {
    problems.push(...(await retell(db, campaignId, manifestId, bands, names.slice(start, start + PER_PAGE))))
    await giveWay()
  }
  if (names.length > 0) await requestMatching(db, campaignId)
  return problems
}

/** Names of the candidates that are here already and of which the manifest or those it replaces say anything. */
async function namesTold(db: Kysely<DB>, campaignId: number, manifestId: number): Promise<string[]> {
  const names = new Set<string>()
  const bases = new Set<string>()
  for (const fileId of [manifestId, ...(await listReplacedBy(db, [manifestId]))]) {
    for (let afterId = 0; ;) {
      const rows = await listManifestRows(db, fileId, afterId, PER_PAGE)
      const last = rows.at(-1)
      if (!last) break
      afterId = last.id
      for (const { file_base } of rows) if (file_base !== null) bases.add(file_base.toLowerCase())
      const named = [...new Set(rows.flatMap(({ candidate }) => candidate ?? []))]
      await db.transaction().execute((transaction) => giveNamesUp(transaction, campaignId, named))
      for (const name of await listCandidateNames(db, campaignId, named)) names.add(name)
      await giveWay()
    }
  }
  for (let afterId = 0; bases.size > 0;) {
    const files = await listFilesOfCandidates(db, campaignId, afterId, PER_PAGE)
    const last = files.at(-1)
    if (!last) break
    afterId = last.id
    for (const { name, candidate } of files) if (bases.has(baseName(name).toLowerCase())) names.add(candidate)
    await giveWay()
  }
  return [...names]
}

async function retell(
  db: Kysely<DB>,
  campaignId: number,
  manifestId: number,
  bands: readonly string[],
  names: readonly string[],
): Promise<NewFileProblem[]> {
  const byName = groupBy(
    await listManifestRowsOfCandidates(db, campaignId, names, manifestId),
    ({ candidate }) => candidate ?? '',
  )
  const planes = groupBy(await listToldPlanes(db, campaignId, names), ({ candidate }) => candidate)
  const bases = [...new Set([...planes.values()].flat().map(({ fileName }) => baseName(fileName)))]
  const byBase = groupBy(await listManifestRowsOfBases(db, campaignId, bases, manifestId), (row) =>
    (row.file_base ?? '').toLowerCase(),
  )
  const rowsOfBase = (fileName: string): ManifestRow[] =>
    rowsOfFile(fileName, byBase.get(baseName(fileName).toLowerCase()) ?? [])
  const problems: NewFileProblem[] = []
  const whole: (ManifestFacts & { name: string })[] = []
  const partial: (ManifestFacts & { name: string })[] = []
  for (const name of names) {
    const own = planes.get(name) ?? []
    const ofFiles = own
      .flatMap(({ fileName }) => rowsOfBase(fileName))
      .filter(({ candidate }) => candidate === null || candidate === name)
    const rows: ManifestRow[] = [...(byName.get(name) ?? []), ...ofFiles]
    // A candidate without images has nothing else to go by, so it keeps what it has.
    const facts = { name, ...withHeaders(manifestFacts(rows), own, bands) }
    if (own.length > 0) whole.push(facts)
    else partial.push(facts)
    const [before] = own
    if (before?.designation && (before.raDeg !== facts.raDeg || before.decDeg !== facts.decDeg)) {
      const line = rows.find((row) => row.file_id === manifestId)?.line ?? null
      const sentence = `The position of ${name} has changed; it keeps its designation ${before.designation}, which is given once.`
      problems.push({ line, sentence })
    }
  }
  const asFacts = (facts: ManifestFacts & { name: string }) => ({ ...facts, imagedAt: null })
  const told = [...whole, ...partial.filter(({ truth }) => truth !== null)]
  const refused = await db.transaction().execute(async (transaction) => {
    await upsertCandidates(transaction, campaignId, whole.map(asFacts), isoTime(), 'withdraw')
    await upsertCandidates(transaction, campaignId, partial.map(asFacts), isoTime())
    return tellTruths(transaction, campaignId, told)
  })
  for (const { name, sentence } of refused) {
    const lines = [
      ...(byName.get(name) ?? []),
      ...(planes.get(name) ?? []).flatMap(({ fileName }) => rowsOfBase(fileName)),
    ]
    const line = lines.find((row) => row.file_id === manifestId && row.truth !== null)?.line ?? null
    problems.push({ line, sentence })
  }
  return problems
}

/** What no manifest tells of place and scale is told by the first band whose header does, as when the candidate was imaged. */
function withHeaders(facts: ManifestFacts, planes: readonly ToldPlane[], bands: readonly string[]): ManifestFacts {
  const ordered = bands.flatMap((band) => planes.find((plane) => plane.band === band) ?? [])
  const centre = ordered
    .map(({ wcs, width, height }) => (wcs === null ? null : imageCentre(JSON.parse(wcs) as Wcs, width, height)))
    .find((position) => position !== null)
  const scale = ordered.find(({ pixelScaleArcsec }) => pixelScaleArcsec !== null)?.pixelScaleArcsec
  return {
    ...facts,
    raDeg: facts.raDeg ?? centre?.raDeg ?? null,
    decDeg: facts.decDeg ?? centre?.decDeg ?? null,
    pixelScaleArcsec: facts.pixelScaleArcsec ?? scale ?? null,
  }
}
