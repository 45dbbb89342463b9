import { mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { insertRecipe } from '@/db/queries/campaigns'
import { bandViewKey, canonicalRecipe, defaultRecipe } from '@/lib/science/imaging/recipe'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { BlobStore } from '@/lib/platform/storage/blob-store'
import { receiveFile, type ReceivedFile } from '@/lib/work/intake/receive-file'
import type { ImagingTools } from '@/lib/work/stamps/campaign-work'
import { readFiles } from '@/lib/work/stamps/read-files'
import * as imageWorker from '@/lib/work/stamps/image-worker'
import { makeScenario, type Scenario } from './scenario'

/** A scenario with a data folder of its own, in which files are delivered and read without threads. */
export interface IntakeScenario extends Scenario {
  tools: ImagingTools
  leadPermit: CampaignPermit<'lead'>
  deliver(name: string, bytes: Uint8Array | string, batch?: string): Promise<ReceivedFile>
  read(): Promise<void>
  /** Fate and fault by name, as `imaged` or `refused no-band`. */
  fates(): Promise<Record<string, string>>
  reasonOf(name: string): Promise<string | null>
  remove(): void
}

async function* once(bytes: Uint8Array): AsyncGenerator<Uint8Array> {
  yield bytes
}

export async function makeIntake(): Promise<IntakeScenario> {
  const scenario = await makeScenario()
  const folder = mkdtempSync(path.join(tmpdir(), 'ringside-intake-'))
  const blobs = new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'incoming'))
  const { db, campaign } = scenario
  const tools: ImagingTools = {
    db,
    blobs,
    stampFolder: path.join(folder, 'stamps'),
    runner: imageWorker,
    workers: 2,
    quietMs: 0,
  }
  const permit = await scenario.permit(scenario.lead, 'lead')
  // Views of this test's own: what the default recipe shows may change.
  const bands = ['g', 'r', 'i']
  const recipe = { ...defaultRecipe(bands), views: ['colour', 'deep', ...bands.map(bandViewKey)] }
  await insertRecipe(db, {
    campaignId: campaign.id,
    version: 2,
    parameters: canonicalRecipe(recipe),
    hash: 'of tests',
    createdBy: scenario.lead.id,
    now: campaign.created_at,
  })
  const files = () => db.selectFrom('file').selectAll().where('campaign_id', '=', campaign.id).orderBy('id').execute()
  return {
    ...scenario,
    tools,
    leadPermit: permit,
    deliver: (name, content, batch) => {
      const bytes = typeof content === 'string' ? new TextEncoder().encode(content) : content
      const body = { chunks: once(bytes), contentLength: String(bytes.byteLength) }
      return receiveFile(db, permit, blobs, { name, body, batch })
    },
    read: () => readFiles(tools, campaign.id, async () => {}),
    fates: async () =>
      Object.fromEntries((await files()).map(({ name, fate, fault }) => [name, fault ? `${fate} ${fault}` : fate])),
    reasonOf: async (name) => (await files()).findLast((file) => file.name === name)?.reason ?? null,
    remove: () => rmSync(folder, { recursive: true, force: true }),
  }
}
