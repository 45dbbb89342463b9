import { rmSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { insertRecipe } from '@/db/queries/campaigns'
import { decodePlanes } from '@/lib/science/imaging/plane-codec'
import { canonicalRecipe, defaultRecipe } from '@/lib/science/imaging/recipe'
import { cutoutFits, cutoutImage, SIDE } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import * as imageWorker from './image-worker'
import { servePlanes } from './serve-planes'

let intake: IntakeScenario
let candidateId: number
beforeEach(async () => {
  intake = await makeIntake()
  // The longer wavelength arrives first.
  await intake.deliver('SWS1_r.fits', cutoutFits({ seed: 2 }))
  await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 1 }))
  await intake.read()
  candidateId = (await intake.db.selectFrom('candidate').select('id').executeTakeFirstOrThrow()).id
})
afterEach(() => intake.remove())

const serve = async (viewer = intake.lead) =>
  servePlanes(intake.db, await intake.permit(viewer, 'read'), intake.tools.blobs, imageWorker, candidateId)

describe('the planes of a candidate', () => {
  it('are its pixels, shortest wavelength first, with the recipe in force, for every member', async () => {
    for (const viewer of [intake.lead, intake.graders[0], intake.reader]) {
      const { planes, recipe } = decodePlanes(gunzipSync(await (await serve(viewer)).bytes()))
      expect(planes.map(({ band, width, height }) => [band, width, height])).toEqual([
        ['g', SIDE, SIDE],
        ['r', SIDE, SIDE],
      ])
      expect(recipe.views).toEqual(['colour', 'deep', 'band:g', 'band:r', 'band:i'])
      const { data } = cutoutImage({ seed: 1 })
      const [g] = planes
      data.forEach((pixel, i) => {
        const bound = ((Math.hypot(g.values[i], 16) / 2048) * 1.001 + 1e-6) * g.sigma
        expect(Math.abs(g.background + g.sigma * g.values[i] - pixel)).toBeLessThanOrEqual(bound)
      })
    }
  })

  it('have a name that stays until a file or the recipe changes, and is in the address of the pictures', async () => {
    const { hash } = await serve()
    expect((await serve(intake.reader)).hash).toBe(hash)
    const pictures = await picturesOf(intake.db, intake.campaign, [candidateId])
    expect(pictures.get(candidateId)?.planesUrl).toBe(
      `/api/campaigns/${intake.campaign.slug}/candidates/${candidateId}/planes?v=${hash}`,
    )
    await intake.deliver('SWS1_g.fits', cutoutFits({ seed: 5 }))
    await intake.read()
    const replaced = (await serve()).hash
    expect(replaced).not.toBe(hash)
    await insertRecipe(intake.db, {
      campaignId: intake.campaign.id,
      version: 3,
      parameters: canonicalRecipe(defaultRecipe(['g', 'r', 'i'])),
      hash: 'another',
      createdBy: intake.lead.id,
      now: intake.campaign.created_at,
    })
    expect((await serve()).hash).not.toBe(replaced)
  })

  it('are as unknown to another campaign as those of a candidate that does not exist', async () => {
    const other = { ...(await intake.permit(intake.lead, 'read')), campaign: intake.otherCampaign }
    const ask = (id: number, permit: typeof other) =>
      servePlanes(intake.db, permit, intake.tools.blobs, imageWorker, id).catch((error: Error) => error.message)
    expect(await ask(candidateId, other)).toBe(await ask(999, await intake.permit(intake.lead, 'read')))
  })

  it('whose file is gone or damaged are refused by the name of the file', async () => {
    const { sha256 } = await intake.db.selectFrom('file').select('sha256').executeTakeFirstOrThrow()
    const { bytes } = await serve()
    rmSync(intake.tools.blobs.pathOf(sha256))
    await expect(bytes()).rejects.toMatchObject({ status: 404, type: 'file-lost', message: /SWS1_r\.fits/ })
  })

  it('that are too large to send are refused with the limit', async () => {
    await intake.db.updateTable('plane').set({ width: 4000, height: 4000 }).execute()
    await expect(serve()).rejects.toMatchObject({ status: 413, type: 'planes-too-large' })
  })
})
