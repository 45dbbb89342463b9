import 'server-only'
import type { Kysely } from 'kysely'
import {
  deletePlanesOfReplaced,
  listHeldPlanes,
  upsertCandidates,
  upsertPlanes,
  type CandidateFacts,
} from '@/db/queries/cutouts'
import { listReplacedBy } from '@/db/queries/duplicates'
import { listStillWaiting, releaseDuplicates, setFileFates, type FileFateUpdate } from '@/db/queries/intake'
import { clearImaged, deleteLaterStamps, replaceStamps, setFilesImaged } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { unsynced } from '@/db/unsynced'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { requestMatching } from '@/lib/platform/jobs/request-matching'
import { isoTime } from '@/lib/platform/clock'
import type { ManifestFacts } from '@/lib/work/intake/manifest-facts'
import { giveNamesUp } from '@/lib/work/intake/give-names-up'
import { groupBy } from '@/lib/work/intake/group-by'
import { tellTruths, type ToldTruth } from '@/lib/work/intake/tell-truths'
import { NOT_IMAGED, type CandidateOutcome, type PlannedPlane } from './worker-tasks'

/** Candidates that come in a row are matched together. */
const MATCH_AFTER_MS = 2000

export interface Campaigned {
  campaignId: number
  recipeId: number
}

/**
 * Writes what came of several candidates in one transaction: candidates, planes, stamps and the fate of each file. A candidate
 * whose files another process has settled meanwhile is left out, so that doing the same work twice changes nothing; so is one
 * that has other planes now than it was to be drawn with, whose files are read again and whose pictures are asked for again.
 * What a power cut takes of it is seen in the fate of the files and read again, so it does not wait for the disk.
 */
export async function commitOutcomes(
  db: Kysely<DB>,
  campaigned: Campaigned,
  outcomes: readonly CandidateOutcome[],
  factsOf: (name: string) => ManifestFacts | undefined,
): Promise<void> {
  await unsynced(db, (connection) =>
    connection.transaction().execute((transaction) => write(transaction, campaigned, outcomes, factsOf)),
  )
}

async function write(
  transaction: Kysely<DB>,
  { campaignId, recipeId }: Campaigned,
  outcomes: readonly CandidateOutcome[],
  factsOf: (name: string) => ManifestFacts | undefined,
): Promise<void> {
  const now = isoTime()
  const waiting = await listStillWaiting(
    transaction,
    outcomes.flatMap(({ files }) => files.map(({ id }) => id)),
  )
  const due = outcomes.filter(({ files }) => files.every(({ id }) => waiting.has(id)))
  await giveNamesUp(
    transaction,
    campaignId,
    due.flatMap(({ name, files }) => (files.length > 0 ? name : [])),
  )
  const overtaken = await findOvertaken(transaction, campaignId, due)
  const standing = due.filter((outcome) => !overtaken.has(outcome))
  const known = standing.filter(({ planes, stamps }) => planes.length > 0 || stamps !== null)
  const facts = known.map((outcome) => candidateFacts(outcome, factsOf(outcome.name), now))
  const ids = await upsertCandidates(transaction, campaignId, facts, now)
  if (facts.length > 0) await requestMatching(transaction, campaignId, MATCH_AFTER_MS)
  // What cannot be has been said of the manifest when it was read.
  await tellTruths(transaction, campaignId, toldBy(known, factsOf))
  const idOf = (name: string): number => {
    const id = ids.get(name)
    if (id === undefined) throw new Error(`Candidate ${name} was not written`)
    return id
  }
  const read = standing.flatMap(({ files }) => files.flatMap(({ id, fate }) => (fate === 'refused' ? [] : id)))
  const replaced = await deletePlanesOfReplaced(transaction, read)
  await releaseDuplicates(transaction, await listReplacedBy(transaction, read), now)
  const planes = known.flatMap(({ name, planes }) => planes.map((plane) => ({ ...plane, candidateId: idOf(name) })))
  await upsertPlanes(transaction, planes)
  const imaged = known.flatMap(({ name, stamps }) => (stamps === null ? [] : { id: idOf(name), name, stamps }))
  const stamps = imaged.flatMap(({ id, stamps }) => stamps.map((stamp) => ({ ...stamp, candidateId: id })))
  await replaceStamps(
    transaction,
    campaignId,
    recipeId,
    imaged.map(({ id }) => id),
    stamps,
  )
  await setFates(transaction, standing, now)
  await setFilesImaged(
    transaction,
    imaged.map(({ id }) => id),
    NOT_IMAGED,
    now,
  )
  const done = new Set(imaged.map(({ id }) => id))
  const redrawn = imaged.filter(({ name }) => standing.some((one) => one.name === name && one.planes.length > 0))
  const isLate = await deleteLaterStamps(
    transaction,
    redrawn.map(({ id }) => id),
    recipeId,
  )
  const drawAgain = [...overtaken].some(({ files }) => files.length === 0)
  if (isLate || drawAgain) await requestImaging(transaction, campaignId)
  await imageLater(
    transaction,
    campaignId,
    replaced.filter((id) => !done.has(id)),
  )
}

const keyOf = ({ band, hdu, planeIndex, fileId }: PlannedPlane): string => `${band} ${hdu} ${planeIndex} ${fileId}`

/** The outcomes whose candidates have other planes now than they were to be drawn with. */
async function findOvertaken(
  db: Kysely<DB>,
  campaignId: number,
  outcomes: readonly CandidateOutcome[],
): Promise<Set<CandidateOutcome>> {
  const names = outcomes.map(({ name }) => name)
  const held = groupBy(await listHeldPlanes(db, campaignId, names), ({ candidate }) => candidate)
  const overtaken = outcomes.filter(({ name, planned }) => {
    const now = new Set((held.get(name) ?? []).map(keyOf))
    return now.size !== planned.length || planned.some((plane) => !now.has(keyOf(plane)))
  })
  return new Set(overtaken)
}

function candidateFacts(outcome: CandidateOutcome, manifest: ManifestFacts | undefined, now: string): CandidateFacts {
  return {
    name: outcome.name,
    raDeg: manifest?.raDeg ?? outcome.position?.raDeg ?? null,
    decDeg: manifest?.decDeg ?? outcome.position?.decDeg ?? null,
    pixelScaleArcsec: manifest?.pixelScaleArcsec ?? outcome.pixelScaleArcsec,
    score: manifest?.score ?? null,
    lensRedshift: manifest?.lensRedshift ?? null,
    sourceRedshift: manifest?.sourceRedshift ?? null,
    imagedAt: outcome.stamps === null ? null : now,
  }
}

function toldBy(
  outcomes: readonly CandidateOutcome[],
  factsOf: (name: string) => ManifestFacts | undefined,
): ToldTruth[] {
  return outcomes.flatMap(({ name }) => {
    const { truth = null, explanation = null } = factsOf(name) ?? {}
    return truth === null ? [] : { name, truth, explanation }
  })
}

/** Files with the same fate and reason are written together: nearly all are 'imaged' without a reason. */
async function setFates(db: Kysely<DB>, outcomes: readonly CandidateOutcome[], now: string): Promise<void> {
  const groups = new Map<string, { to: FileFateUpdate; ids: number[] }>()
  for (const { files, stamps, imagingFault } of outcomes) {
    for (const { id, ...file } of files) {
      const fate = file.fate === 'read' && stamps !== null ? 'imaged' : file.fate
      const reason = [file.reason, file.fate === 'read' ? imagingFault : null].filter(Boolean).join(' ') || null
      const to: FileFateUpdate = { ...file, fate, reason }
      const key = JSON.stringify(to)
      const group = groups.get(key)
      if (group) group.ids.push(id)
      else groups.set(key, { to, ids: [id] })
    }
  }
  for (const { to, ids } of groups.values()) {
    await setFileFates(db, ids, to, now)
    // What is refused stands in nobody's way: the same bytes under another name are read for themselves.
    if (to.fate === 'refused') await releaseDuplicates(db, ids, now)
  }
}

/** Candidates whose plane went to another candidate: they are drawn anew from what is left. */
async function imageLater(db: Kysely<DB>, campaignId: number, candidateIds: number[]): Promise<void> {
  if (candidateIds.length === 0) return
  await clearImaged(db, candidateIds)
  await requestImaging(db, campaignId)
}

export interface ImageCandidatesPayload {
  campaignId: number
  /** These, imaged or not; left out: those that have no stamps by the recipe in force. */
  candidateIds?: number[]
  /** By this recipe of the campaign; left out: by the one in force. */
  recipeId?: number
}

/** Asks for stamps: of these candidates anew, by a recipe of theirs, or of all that have none by the recipe in force. */
export async function requestImaging(
  db: Kysely<DB>,
  campaignId: number,
  candidateIds?: number[],
  recipeId?: number,
): Promise<void> {
  const payload: ImageCandidatesPayload = { campaignId, candidateIds, recipeId }
  const uniqueKey = [
    JOB.imageCandidates,
    campaignId,
    ...(candidateIds ?? ['all']),
    ...(recipeId === undefined ? [] : ['by', recipeId]),
  ].join(':')
  await enqueueJob(db, { kind: JOB.imageCandidates, campaignId, uniqueKey, payload })
}
