import { createHash } from 'node:crypto'
import { mkdir, mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { findRelease, listReleaseFiles } from '@/db/queries/releases'
import { BlobStore } from '@/lib/platform/storage/blob-store'
import { stampPath } from '@/lib/work/stamps/stamp-store'
import { giveGrades } from '@/tests/_support/judged-candidate'
import { addImagedCandidate, makeScenario, type Scenario } from '@/tests/_support/scenario'
import { makeRelease, type ReleaseTools } from './make-release'
import { publishRelease } from './publish-release'
import type { ReleaseInput } from './release-input'

export interface ReleaseScenario extends Scenario {
  tools: ReleaseTools
  end(): Promise<void>
}

export async function makeReleaseScenario(rule: Parameters<typeof makeScenario>[0] = {}): Promise<ReleaseScenario> {
  const scenario = await makeScenario(rule)
  const folder = await mkdtemp(path.join(tmpdir(), 'ringside-release-'))
  const tools = {
    db: scenario.db,
    blobs: new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'temporary')),
    stampFolder: path.join(folder, 'stamps'),
    siteUrl: 'http://127.0.0.1:3000',
  }
  return {
    ...scenario,
    tools,
    async end() {
      await scenario.db.destroy()
      await rm(folder, { recursive: true, force: true })
    },
  }
}

/** A candidate with a colour stamp (bytes that stand for a picture) and first grades, a letter a grader; a blank passes one over. */
export async function addGraded(
  scenario: ReleaseScenario,
  name: string,
  grades: string,
  { raDeg = 150.1, decDeg = 2.2, remark = null as string | null, tags = [] as string[] } = {},
): Promise<number> {
  const { db, campaign, tools } = scenario
  const id = await addImagedCandidate(db, campaign, name, { raDeg, decDeg })
  await giveGrades(scenario, id, { grades, remark, tags })
  const recipe = await db
    .selectFrom('recipe')
    .select('id')
    .where('campaign_id', '=', campaign.id)
    .executeTakeFirstOrThrow()
  const picture = new TextEncoder().encode(`PNG of ${name}`)
  const sha256 = createHash('sha256').update(picture).digest('hex')
  await mkdir(path.dirname(stampPath(tools.stampFolder, sha256)), { recursive: true })
  await writeFile(stampPath(tools.stampFolder, sha256), picture)
  await db
    .insertInto('stamp')
    .values({
      campaign_id: campaign.id,
      candidate_id: id,
      recipe_id: recipe.id,
      view: 'colour',
      sha256,
      bytes: picture.byteLength,
      width: 1,
      height: 1,
      note: null,
    })
    .execute()
  return id
}

export const RELEASE: ReleaseInput = {
  kind: 'release',
  title: 'Lenses of the north field',
  description: 'Candidates that four people looked at.',
  authors: 'Heron, Grey\nThe Saltmarsh Collaboration',
  licence: 'CC-BY-4.0',
  publisher: 'Saltmarsh Wide Survey',
  year: 2026,
  cautionsRead: true,
}

/** Publishes and makes the files, as the job does. */
export async function publishAndMake(scenario: ReleaseScenario, input: Partial<ReleaseInput> = {}) {
  const permit = await scenario.permit(scenario.lead, 'lead')
  const { id, number } = await publishRelease(scenario.db, permit, { ...RELEASE, ...input })
  await makeRelease(scenario.tools, id, async () => {})
  const release = (await findRelease(scenario.db, scenario.campaign.id, number))!
  return { release, files: await listReleaseFiles(scenario.db, id) }
}

export async function readText(
  { tools }: ReleaseScenario,
  files: readonly { name: string; sha256: string }[],
  name: string,
): Promise<string> {
  const file = files.find((one) => one.name === name)
  if (!file) throw new Error(`There is no ${name}.`)
  return new TextDecoder().decode(await tools.blobs.read(file.sha256))
}
