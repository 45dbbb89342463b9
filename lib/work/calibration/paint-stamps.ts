import 'server-only'
import type { Kysely } from 'kysely'
import { findBatchByName, insertBatch } from '@/db/queries/batches'
import {
  insertCalibrationStamp,
  listGalaxiesById,
  listMadeOfOrder,
  listPositionsByLot,
  scoreByLot,
  type GalaxyFacts,
} from '@/db/queries/calibration'
import { listHeldPlanes } from '@/db/queries/cutouts'
import { insertFile } from '@/db/queries/intake'
import { findCampaignById } from '@/db/queries/stamps'
import type { DB } from '@/db/schema'
import { fromJson } from '@/db/schema/values'
import { recordEvent } from '@/lib/platform/audit/record-event'
import { isoTime } from '@/lib/platform/clock'
import type { BlobStore, StoredBlob } from '@/lib/platform/storage/blob-store'
import type { PaintingRanges } from '@/lib/science/lensing/painting/painting-ranges'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import type { SkyPosition } from '@/lib/science/sky/separation'
import { freeName } from '@/lib/work/intake/free-name'
import { requestImaging } from '@/lib/work/stamps/commit-outcomes'
import type { Painted, PaintedFile, PaintRunner } from '@/lib/work/stamps/paint-task'
import { heldPlane } from '@/lib/work/stamps/plan-imaging'
import { EXPLAIN_COPY, explainPainting } from './explain-painting'
import { digitsOf, placeLike } from './stamp-place'

export interface PaintStampsPayload {
  campaignId: number
  personId: number
  /** Names the order, so that a job that is begun again goes on where it was. */
  order: string
  seed: number
  ranges: PaintingRanges
  galaxies: number[]
  lenses: number
  others: number
}

export interface PaintingTools {
  db: Kysely<DB>
  blobs: BlobStore
  runner: PaintRunner
}

export const PAINTED = 'calibration.painted'

/** What the lead is told when it is done. */
export interface PaintingDone {
  order: string
  made: number
  wanted: number
  /** Galaxies that could not be used, with the reason. */
  skipped: { name: string; reason: string }[]
}

interface Part {
  galaxy: GalaxyFacts
  isLens: boolean
  seed: number
}

/**
 * Makes the calibration stamps of an order: lenses painted over galaxies, and galaxies as they are, in an order by lot, so that their
 * ids tell nothing. A galaxy that cannot be used gives way to the next that is left. Their pictures come by the ordinary imaging.
 */
export async function paintStamps(
  tools: PaintingTools,
  payload: PaintStampsPayload,
  progress: (done: number, total: number) => Promise<void>,
): Promise<void> {
  const { db } = tools
  const wanted = payload.lenses + payload.others
  const found = await listGalaxiesById(db, payload.campaignId, payload.galaxies)
  const random = new SeededRandom(payload.seed)
  const galaxies = shuffled(
    payload.galaxies.flatMap((id) => found.find((galaxy) => galaxy.id === id) ?? []),
    random,
  )
  const kinds = shuffled(
    Array.from({ length: wanted }, (_, k) => k < payload.lenses),
    random,
  )
  const made = new Map((await listMadeOfOrder(db, payload.campaignId, payload.order)).map((row) => [row.part, row]))
  const skipped: PaintingDone['skipped'] = []
  const ids: number[] = []
  // Each galaxy has its own number, so that a second run of the same order does the same with it.
  const queue = galaxies.map((galaxy, k) => ({ galaxy, part: k, seed: random.next32() }))
  let done = 0
  for (const { galaxy, part, seed } of queue) {
    if (done === wanted) break
    await progress(done, wanted)
    const known = made.get(part)
    const id = known?.id ?? (await makeStamp(tools, payload, part, { galaxy, isLens: kinds[done], seed }, skipped))
    if (id === null) continue
    if (!known?.isImaged) ids.push(id)
    done++
  }
  await db.transaction().execute(async (transaction) => {
    if (ids.length > 0) await requestImaging(transaction, payload.campaignId, ids)
    const detail: PaintingDone = { order: payload.order, made: done, wanted, skipped }
    const { personId, campaignId } = payload
    await recordEvent(transaction, { personId, campaignId, action: PAINTED, detail: { ...detail } })
  })
  await progress(done, wanted)
}

function shuffled<T>(items: readonly T[], random: SeededRandom): T[] {
  const rest = [...items]
  return items.map(() => rest.splice(random.integer(0, rest.length - 1), 1)[0])
}

async function makeStamp(
  tools: PaintingTools,
  payload: PaintStampsPayload,
  part: number,
  { galaxy, isLens, seed }: Part,
  skipped: PaintingDone['skipped'],
): Promise<number | null> {
  const { db, runner } = tools
  const campaign = await findCampaignById(db, payload.campaignId)
  if (!campaign) throw new Error(`There is no campaign ${payload.campaignId}`)
  const bands = fromJson(campaign.bands)
  const random = new SeededRandom(seed)
  const held = (await listHeldPlanes(db, campaign.id, [galaxy.name]))
    .sort((a, b) => bands.indexOf(a.band) - bands.indexOf(b.band))
    .map((row) => heldPlane(tools, row))
  const position = await placeFor(db, campaign.id, galaxy, random)
  const name = await freeName(db, campaign.id, position, payload.lenses + payload.others, random)
  const task = {
    planes: held,
    pixelScaleArcsec: galaxy.pixelScaleArcsec,
    ranges: isLens ? payload.ranges : null,
    seed: random.next32(),
    name,
    position,
    recipe: null,
  }
  const painted = await runner.paint(task)
  if ('fault' in painted) {
    skipped.push({ name: galaxy.name, reason: painted.fault })
    return null
  }
  const score = await scoreByLot(db, campaign.id, random.uniform())
  return keepStamp(tools, payload, part, { galaxy, isLens, seed }, { name, score, position, painted })
}

/** Somewhere among the candidates, told with as many digits as the galaxy's own; null where it has no position. */
async function placeFor(db: Kysely<DB>, campaignId: number, galaxy: GalaxyFacts, random: SeededRandom) {
  const { raDeg, decDeg } = galaxy
  if (raDeg === null || decDeg === null) return null
  const sample = await listPositionsByLot(db, campaignId, random.uniform())
  return placeLike(sample, { ra: digitsOf(raDeg), dec: digitsOf(decDeg) }, random)
}

interface Kept {
  name: string
  score: number | null
  position: SkyPosition | null
  painted: Painted
}

async function keepStamp(
  { db, blobs }: PaintingTools,
  { campaignId, personId, order }: PaintStampsPayload,
  part: number,
  { galaxy, isLens, seed }: Part,
  { name, score, position, painted }: Kept,
): Promise<number> {
  const stored: (PaintedFile & { blob: StoredBlob })[] = []
  for (const file of painted.files) stored.push({ ...file, blob: await blobs.put(file.bytes) })
  return db.transaction().execute(async (transaction) => {
    const now = isoTime()
    const batchId = await orderBatch(transaction, campaignId, personId, order, now)
    const planes = []
    for (const { band, plane, blob } of stored) {
      const file = await insertFile(transaction, {
        campaignId,
        batchId,
        // Like nothing that a survey delivers: a file of the same name would take its place.
        name: `calibration-${order.slice(0, 8)}-${part}_${band}.fits`,
        kind: 'fits',
        ...blob,
        fate: 'read',
        reason: null,
        duplicateOf: null,
        personId,
        now,
      })
      planes.push({ ...plane, fileId: file.id })
    }
    const { turned, truth } = painted
    return insertCalibrationStamp(
      transaction,
      {
        ...galaxy,
        campaignId,
        name,
        ...(position ?? painted.position ?? { raDeg: null, decDeg: null }),
        truth: isLens ? 'lens' : 'not a lens',
        score,
        paintedOver: galaxy.id,
        painting: { order, part, seed, turned, painted: truth },
        explanation: truth ? explainPainting(truth) : EXPLAIN_COPY,
        now,
      },
      planes,
    )
  })
}

async function orderBatch(
  db: Kysely<DB>,
  campaignId: number,
  personId: number,
  order: string,
  now: string,
): Promise<number> {
  const name = `Calibration stamps ${order.slice(0, 8)}`
  const known = await findBatchByName(db, campaignId, name)
  return known?.id ?? insertBatch(db, { campaignId, name, personId, now })
}
