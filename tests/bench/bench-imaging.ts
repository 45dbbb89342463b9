// Imaging, from bytes on disk to committed rows and stored stamps, beside the script an astronomer would write and beside the
// floor: the same pictures through sharp's PNG encoder alone. The three run in turn, so that a noisy minute hits them all.
import { mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises'
import { availableParallelism, tmpdir } from 'node:os'
import path from 'node:path'
import type { Kysely } from 'kysely'
import sharp from 'sharp'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { insertRecipe } from '@/db/queries/campaigns'
import { insertPerson } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { BlobStore } from '@/lib/platform/storage/blob-store'
import { canonicalRecipe, defaultRecipe } from '@/lib/science/imaging/recipe'
import { simulateCandidate, SIMULATED_KINDS } from '@/lib/science/lensing/simulate-candidate'
import { demoFiles } from '@/fixtures/demo/demo-candidates'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { permitCampaign } from '@/lib/work/people/permission'
import type { ImagingTools } from '@/lib/work/stamps/campaign-work'
import { deliverFolder, readDelivered } from '@/lib/work/stamps/deliver-folder'
import { imagePool, workerCount } from '@/lib/work/stamps/image-pool'
import { askPeer } from './_peer'

const CANDIDATES = 240
const ROUNDS = 3

async function writeCutouts(folder: string): Promise<void> {
  for (let index = 0; index < CANDIDATES; index++) {
    const simulated = simulateCandidate(SIMULATED_KINDS[index % SIMULATED_KINDS.length], 1000 + index)
    const name = `BENCH${String(index).padStart(4, '0')}`
    const position = { raDeg: 10 + index / 100, decDeg: 1 }
    for (const file of demoFiles({ name, ...position, score: 0.9, simulated })) {
      await writeFile(path.join(folder, file.name), file.bytes)
    }
  }
}

interface Installation {
  db: Kysely<DB>
  tools: ImagingTools
  campaignId: number
}

/** The pictures that the peer makes, or all that a new campaign makes. */
type Pictures = 'the same four pictures' | 'all views'
const SAME_FOUR = ['colour', 'band:g', 'band:r', 'band:i']

/** A new installation that has taken the files in and read none. */
async function deliver(cutouts: string, folder: string, pictures: Pictures): Promise<Installation> {
  const db = openDatabase(path.join(folder, 'ringside.sqlite'))
  await migrateToLatest(db)
  const blobs = new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'incoming'))
  const now = '2026-01-01T00:00:00.000Z'
  const email = 'avocet@saltmarsh.test'
  const id = await insertPerson(db, { email, name: 'avocet', passwordHash: null, isAdmin: true, now })
  const viewer = { id, name: 'avocet', email, isAdmin: true }
  const input = { name: 'Bench', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: 'g r i' }
  const campaign = await createCampaign(db, viewer, CampaignInput.parse(input), RuleInput.parse({}))
  const permit = await permitCampaign(db, viewer, campaign.slug, 'lead')
  if (pictures === 'the same four pictures') {
    const parameters = canonicalRecipe({ ...defaultRecipe(['g', 'r', 'i']), views: SAME_FOUR })
    await insertRecipe(db, { campaignId: campaign.id, version: 2, parameters, hash: 'bench', createdBy: id, now })
  }
  await deliverFolder(db, permit, blobs, cutouts)
  const stampFolder = path.join(folder, 'stamps')
  const tools = { db, blobs, stampFolder, runner: imagePool, workers: workerCount(), quietMs: 0 }
  return { db, tools, campaignId: campaign.id }
}

async function seconds(work: () => Promise<unknown>): Promise<number> {
  const started = performance.now()
  await work()
  return (performance.now() - started) / 1000
}

/** Pixels of every stamp, for the floor. */
async function decodeStamps(folder: string) {
  const names = (await readdir(folder, { recursive: true, withFileTypes: true })).filter((entry) => entry.isFile())
  return Promise.all(
    names.map(async (entry) => {
      const bytes = await readFile(path.join(entry.parentPath, entry.name))
      const { channels = 1 } = await sharp(bytes).metadata()
      const image = channels === 1 ? sharp(bytes).toColourspace('b-w') : sharp(bytes)
      return image.raw().toBuffer({ resolveWithObject: true })
    }),
  )
}

/** The same encoder settings as lib/work/stamps/draw-stamps.ts, in sharp's own threads, storing nothing. */
async function encodeAll(pictures: Awaited<ReturnType<typeof decodeStamps>>): Promise<void> {
  const lanes = 2 * availableParallelism()
  let next = 0
  const lane = async () => {
    for (let picture = pictures[next++]; picture; picture = pictures[next++]) {
      const { width, height, channels } = picture.info
      const image = sharp(picture.data, { raw: { width, height, channels } })
      const grey = channels === 1 ? image.toColourspace('b-w') : image
      await grey.png({ compressionLevel: 2, adaptiveFiltering: false }).toBuffer()
    }
  }
  await Promise.all(Array.from({ length: lanes }, lane))
}

const median = (values: number[]) => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)]

interface Rates {
  ours: number[]
  floors: number[]
  views: number
}

async function round(cutouts: string, pictures: Pictures, rates: Rates | null): Promise<void> {
  const folder = await mkdtemp(path.join(tmpdir(), 'ringside-bench-'))
  const { db, tools, campaignId } = await deliver(cutouts, folder, pictures)
  const own = await seconds(() => readDelivered(tools, campaignId))
  const { stamps } = await db
    .selectFrom('stamp')
    .select((e) => e.fn.countAll<number>().as('stamps'))
    .executeTakeFirstOrThrow()
  if (stamps < CANDIDATES * 4) throw new Error(`Only ${stamps} stamps were made`)
  const decoded = await decodeStamps(tools.stampFolder)
  const floor = await seconds(() => encodeAll(decoded))
  await db.destroy()
  await rm(folder, { recursive: true, force: true })
  if (!rates) return
  rates.ours.push(CANDIDATES / own)
  rates.floors.push(CANDIDATES / floor)
  rates.views = stamps / CANDIDATES
}

export async function benchImaging(): Promise<string[]> {
  const cutouts = await mkdtemp(path.join(tmpdir(), 'ringside-bench-'))
  const results: Record<Pictures, Rates> = {
    'the same four pictures': { ours: [], floors: [], views: 0 },
    'all views': { ours: [], floors: [], views: 0 },
  }
  const kinds = Object.keys(results) as Pictures[]
  const peers: number[] = []
  let note = ''
  try {
    await writeCutouts(cutouts)
    // The first round warms up the workers and the disk's cache.
    await round(cutouts, 'all views', null)
    for (let count = 0; count < ROUNDS; count++) {
      for (const pictures of kinds) await round(cutouts, pictures, results[pictures])
      const peer = askPeer('imaging.py', cutouts, path.join(cutouts, '..', `${path.basename(cutouts)}-peer`))
      if ('answer' in peer) peers.push(Number(/([\d.]+) candidates\/s/.exec(peer.answer)?.[1]))
      else note = peer.skipped
    }
  } finally {
    await rm(cutouts, { recursive: true, force: true })
    await rm(`${cutouts}-peer`, { recursive: true, force: true })
  }
  const head = `imaging, ${CANDIDATES} candidates of 3 bands, 80 by 80 pixels, ${workerCount()} workers, median of ${ROUNDS} rounds, bytes on disk to committed rows and stored stamps`
  const lines = kinds.map((pictures) => {
    const { ours, floors, views } = results[pictures]
    const [own, floor] = [median(ours), median(floors)]
    return `  ${pictures} (${views}): ${own.toFixed(0)} candidates/s; sharp's PNG encoder alone ${floor.toFixed(0)}, so ${(floor / own).toFixed(2)} times the floor`
  })
  const ratios = kinds.map(
    (pictures) => `${(median(results[pictures].ours) / median(peers)).toFixed(1)} for ${pictures}`,
  )
  return [
    head,
    ...lines,
    peers.length
      ? `  imaging.py (4 pictures): ${median(peers).toFixed(0)} candidates/s; Ringside is times as fast: ${ratios.join(', ')}`
      : `  ${note}`,
  ]
}
