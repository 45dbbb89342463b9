import { rmSync, statSync, truncateSync } from 'node:fs'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { fromJson } from '@/db/schema/values'
import { defaultRecipe, type Recipe } from '@/lib/science/imaging/recipe'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { changeRecipe } from './change-recipe'
import type { ImageCandidatesPayload } from './commit-outcomes'
import { imageCandidates } from './image-candidates'
import { serveStamp } from './serve-stamp'
import { stampPath } from './stamp-store'

let intake: IntakeScenario
let sha256: string
let stamp: string
beforeEach(async () => {
  intake = await makeIntake()
  await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
  await intake.read()
  const row = await intake.db
    .selectFrom('stamp')
    .select('sha256')
    .where('view', '=', 'band:g')
    .executeTakeFirstOrThrow()
  sha256 = row.sha256
  stamp = stampPath(intake.tools.stampFolder, sha256)
})
afterEach(() => intake.remove())

const imagingJobs = async () => {
  const jobs = await intake.db.selectFrom('job').selectAll().where('kind', '=', 'image-candidates').execute()
  return jobs.map(({ payload }) => fromJson(payload) as ImageCandidatesPayload)
}

describe('a stamp', () => {
  it('is served to every member', async () => {
    for (const viewer of [intake.lead, intake.graders[0], intake.reader]) {
      const bytes = await serveStamp(intake.db, await intake.permit(viewer, 'read'), intake.tools.stampFolder, sha256)
      // The PNG signature: PNG specification, section 5.2.
      expect([...bytes.slice(0, 8)]).toEqual([137, 80, 78, 71, 13, 10, 26, 10])
    }
  })

  it('of another campaign is as unknown as one that does not exist', async () => {
    await expect(intake.permit(intake.stranger, 'read')).rejects.toMatchObject({ status: 404 })
    const other = { ...(await intake.permit(intake.lead, 'read')), campaign: intake.otherCampaign }
    const asked = [sha256, 'f'.repeat(64)].map((hash) =>
      serveStamp(intake.db, other, intake.tools.stampFolder, hash).catch((error: Error) => error.message),
    )
    const [known, unknown] = await Promise.all(asked)
    expect(known).toBe(unknown)
    expect(await imagingJobs()).toEqual([])
  })

  it.each([
    ['is gone', () => rmSync(stamp)],
    ['was emptied by a power cut', () => truncateSync(stamp, 0)],
    ['was damaged', () => truncateSync(stamp, statSync(stamp).size - 1)],
  ])('that %s is never shown and is made again', async (_, harm) => {
    harm()
    const permit = await intake.permit(intake.lead, 'read')
    const serve = () => serveStamp(intake.db, permit, intake.tools.stampFolder, sha256)
    await expect(serve()).rejects.toMatchObject({ status: 404, type: 'stamp-lost' })
    const [payload] = await imagingJobs()
    await imageCandidates(intake.tools, payload, async () => {})
    expect((await serve()).byteLength).toBeGreaterThan(0)
  })
})

describe('a stamp by an earlier recipe', () => {
  const darker: Recipe = { ...defaultRecipe(['g', 'r', 'i']), views: ['band:g'] }
  darker.band = { ...darker.band, leastWhiteSigma: 500, mostWhiteSigma: 500 }
  const stampRows = () =>
    intake.db.selectFrom('stamp').select(['recipe_id', 'view', 'sha256']).orderBy('recipe_id').orderBy('view').execute()

  it('that is lost is made again by that recipe, and those by the recipe in force stay', async () => {
    const { version } = await intake.db
      .selectFrom('recipe')
      .select('version')
      .where('campaign_id', '=', intake.campaign.id)
      .orderBy('version', 'desc')
      .executeTakeFirstOrThrow()
    await changeRecipe(intake.db, intake.leadPermit, { recipe: darker, after: version })
    await imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async () => {})
    const before = await stampRows()
    expect(new Set(before.filter(({ view }) => view === 'band:g').map((row) => row.sha256)).size).toBe(2)
    const permit = await intake.permit(intake.lead, 'read')
    const serve = () => serveStamp(intake.db, permit, intake.tools.stampFolder, sha256)
    const bytes = await serve()
    rmSync(stamp)
    await expect(serve()).rejects.toMatchObject({ status: 404 })
    const payload = (await imagingJobs()).find(({ candidateIds }) => candidateIds !== undefined)
    if (!payload) throw new Error('It was not asked for')
    await imageCandidates(intake.tools, payload, async () => {})
    expect(await serve()).toEqual(bytes)
    expect(await stampRows()).toEqual(before)
  })

  it('is not made by a recipe of another campaign', async () => {
    const foreign = await intake.db
      .selectFrom('recipe')
      .select('id')
      .where('campaign_id', '=', intake.otherCampaign.id)
      .executeTakeFirstOrThrow()
    const before = await stampRows()
    const asked = { campaignId: intake.campaign.id, candidateIds: [1], recipeId: foreign.id }
    await expect(imageCandidates(intake.tools, asked, async () => {})).rejects.toThrow('is not of campaign')
    expect(await stampRows()).toEqual(before)
  })
})

describe('imaging anew', () => {
  it('draws every candidate that has no stamps by the recipe in force, and keeps positions as they are', async () => {
    const { db, campaign } = intake
    await db.updateTable('candidate').set({ imaged_at: null, ra_deg: 10, dec_deg: 20 }).execute()
    await db.deleteFrom('stamp').execute()
    await imageCandidates(intake.tools, { campaignId: campaign.id }, async () => {})
    const row = await db.selectFrom('candidate').selectAll().executeTakeFirstOrThrow()
    expect(row).toMatchObject({ ra_deg: 10, dec_deg: 20, imaged_at: expect.any(String) })
    expect(await db.selectFrom('stamp').select('view').execute()).toContainEqual({ view: 'band:g' })
  })

  it('does nothing where all is drawn', async () => {
    const before = await intake.db.selectFrom('stamp').selectAll().execute()
    await imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async () => {})
    expect(await intake.db.selectFrom('stamp').selectAll().execute()).toEqual(before)
  })
})
