/** What the benchmarks of imaging share: cutouts on disk, installations that have taken them in, and what a run of them costs. */
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import type { Kysely } from 'kysely'
import { openDatabase } from '@/db/connection'
import { migrateToLatest } from '@/db/migrator'
import { insertRecipe } from '@/db/queries/campaigns'
import { insertPerson } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { demoFiles } from '@/fixtures/demo/demo-candidates'
import { BlobStore } from '@/lib/platform/storage/blob-store'
import { canonicalRecipe, defaultRecipe } from '@/lib/science/imaging/recipe'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { simulateCandidate, SIMULATED_KINDS, type SimulatedCandidate } from '@/lib/science/lensing/simulate-candidate'
import { CampaignInput } from '@/lib/work/campaigns/campaign-input'
import { createCampaign } from '@/lib/work/campaigns/create-campaign'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { permitCampaign } from '@/lib/work/people/permission'
import type { ImagingTools } from '@/lib/work/stamps/campaign-work'
import { deliverFolder, readDelivered } from '@/lib/work/stamps/deliver-folder'
import { imagePool, workerCount } from '@/lib/work/stamps/image-pool'

export const BANDS = ['g', 'r', 'i']
/** The pictures that the peer makes. */
export const SAME_FOUR = ['colour', 'band:g', 'band:r', 'band:i']

const DISTINCT = 240

export const simulated = (index: number): SimulatedCandidate =>
  simulateCandidate(SIMULATED_KINDS[index % SIMULATED_KINDS.length], 1000 + index)

/** Cutouts of so many candidates; beyond 240 the same objects again under other noise, so that no two files are equal. */
export async function writeCutouts(folder: string, candidates: number): Promise<void> {
  const objects = Array.from({ length: Math.min(candidates, DISTINCT) }, (_, index) => simulated(index))
  for (let index = 0; index < candidates; index++) {
    const object = objects[index % DISTINCT]
    const name = `BENCH${String(index).padStart(5, '0')}`
    const shown = index < DISTINCT ? object : withMoreNoise(object, index)
    const position = { raDeg: (10 + index / 100) % 360, decDeg: 1 }
    for (const file of demoFiles({ name, ...position, score: 0.9, simulated: shown })) {
      await writeFile(path.join(folder, file.name), file.bytes)
    }
  }
}

function withMoreNoise(object: SimulatedCandidate, seed: number): SimulatedCandidate {
  const random = new SeededRandom(seed)
  const most = 0.02 * object.bands[0].data.reduce((largest, value) => Math.max(largest, Math.abs(value)), 0)
  const bands = object.bands.map(({ band, data }) => ({
    band,
    data: data.map((value) => value + most * (random.uniform() - 0.5)),
  }))
  return { ...object, bands }
}

export interface Run {
  seconds: number
  /** Processor time of this process and its threads, all of it. */
  processorSeconds: number
  stamps: number
}

/**
 * Takes a folder of cutouts into a new installation and images them: measured is what comes after delivery, from bytes on disk to
 * committed rows and stored stamps.
 * @param views of the recipe; null for all that a new campaign makes.
 */
export async function imageFolder(
  cutouts: string,
  views: string[] | null,
  look?: (stampFolder: string) => Promise<void>,
): Promise<Run> {
  const folder = await mkdtemp(path.join(tmpdir(), 'ringside-bench-'))
  const { db, tools, campaignId } = await deliver(cutouts, folder, views)
  try {
    const before = process.cpuUsage()
    const started = performance.now()
    await readDelivered(tools, campaignId)
    const seconds = (performance.now() - started) / 1000
    const { user, system } = process.cpuUsage(before)
    const { stamps } = await db
      .selectFrom('stamp')
      .select((e) => e.fn.countAll<number>().as('stamps'))
      .executeTakeFirstOrThrow()
    await look?.(tools.stampFolder)
    return { seconds, processorSeconds: (user + system) / 1e6, stamps }
  } finally {
    await db.destroy()
    await rm(folder, { recursive: true, force: true })
  }
}

interface Installation {
  db: Kysely<DB>
  tools: ImagingTools
  campaignId: number
}

async function deliver(cutouts: string, folder: string, views: string[] | null): Promise<Installation> {
  const db = openDatabase(path.join(folder, 'ringside.sqlite'))
  await migrateToLatest(db)
  const blobs = new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'incoming'))
  const now = '2026-01-01T00:00:00.000Z'
  const email = 'avocet@saltmarsh.test'
  const id = await insertPerson(db, { email, name: 'avocet', passwordHash: null, isAdmin: true, now })
  const viewer = { id, name: 'avocet', email, isAdmin: true }
  const input = { name: 'Bench', survey: 'Saltmarsh Wide Survey', acronym: 'SWS', bands: BANDS.join(' ') }
  const campaign = await createCampaign(db, viewer, CampaignInput.parse(input), RuleInput.parse({}))
  const permit = await permitCampaign(db, viewer, campaign.slug, 'lead')
  if (views !== null) {
    const parameters = canonicalRecipe({ ...defaultRecipe(BANDS), views })
    await insertRecipe(db, { campaignId: campaign.id, version: 2, parameters, hash: 'bench', createdBy: id, now })
  }
  await deliverFolder(db, permit, blobs, cutouts)
  const stampFolder = path.join(folder, 'stamps')
  const tools = { db, blobs, stampFolder, runner: imagePool, workers: workerCount(), quietMs: 0 }
  return { db, tools, campaignId: campaign.id }
}

export const median = (values: number[]): number => values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)]

/** 'met' or by how much it is missed. */
export const verdict = (met: boolean): string => (met ? 'met' : 'MISSED')
