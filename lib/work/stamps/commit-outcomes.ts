import 'server-only'
import type { Kysely } from 'kysely'
import { deletePlanesOfReplaced, upsertCandidates, upsertPlanes, type CandidateFacts } from '@/db/queries/cutouts'
import { listStillWaiting, releaseDuplicates, setFileFates, type FileFateUpdate } from '@/db/queries/intake'
import { clearImaged, replaceStamps, setFilesImaged } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { enqueueJob } from '@/lib/platform/jobs/enqueue-job'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { isoTime } from '@/lib/platform/clock'
import type { ManifestFacts } from '@/lib/work/intake/manifest-facts'
import type { CandidateOutcome } from './worker-tasks'

export interface Campaigned {
  campaignId: number
  recipeId: number
}

/**
 * Writes what came of several candidates in one transaction: candidates, planes, stamps and the fate of each file. A candidate
 * whose files another process has settled meanwhile is left out, so that doing the same work twice changes nothing.
 */
export async function commitOutcomes(
  db: Kysely<DB>,
  { campaignId, recipeId }: Campaigned,
  outcomes: readonly CandidateOutcome[],
  factsOf: (name: string) => ManifestFacts | undefined,
): Promise<void> {
  await db.transaction().execute(async (transaction) => {
    const now = isoTime()
    const waiting = await listStillWaiting(
      transaction,
      outcomes.flatMap(({ files }) => files.map(({ id }) => id)),
    )
    const standing = outcomes.filter(({ files }) => files.every(({ id }) => waiting.has(id)))
    const known = standing.filter(({ planes, stamps }) => planes.length > 0 || stamps !== null)
    const facts = known.map((outcome) => candidateFacts(outcome, factsOf(outcome.name), now))
    const ids = await upsertCandidates(transaction, campaignId, facts, now)
    const idOf = (name: string): number => {
      const id = ids.get(name)
      if (id === undefined) throw new Error(`Candidate ${name} was not written`)
      return id
    }
    const read = standing.flatMap(({ files }) => files.flatMap(({ id, fate }) => (fate === 'read' ? id : [])))
    const replaced = await deletePlanesOfReplaced(transaction, read)
    const planes = known.flatMap(({ name, planes }) => planes.map((plane) => ({ ...plane, candidateId: idOf(name) })))
    await upsertPlanes(transaction, planes)
    const imaged = known.flatMap(({ name, stamps }) => (stamps === null ? [] : { id: idOf(name), stamps }))
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
      now,
    )
    const done = new Set(imaged.map(({ id }) => id))
    await imageLater(
      transaction,
      campaignId,
      replaced.filter((id) => !done.has(id)),
    )
  })
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
}

/** Asks for stamps: of these candidates anew, or of all that have none by the recipe in force. */
export async function requestImaging(db: Kysely<DB>, campaignId: number, candidateIds?: number[]): Promise<void> {
  const payload: ImageCandidatesPayload = { campaignId, candidateIds }
  const uniqueKey = [JOB.imageCandidates, campaignId, ...(candidateIds ?? ['all'])].join(':')
  await enqueueJob(db, { kind: JOB.imageCandidates, campaignId, uniqueKey, payload })
}
