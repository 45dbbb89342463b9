import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { rmSync } from 'node:fs'
import sharp from 'sharp'
import { defaultRecipe } from '@/lib/science/imaging/recipe'
import { cutoutFits } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import * as imageWorker from './image-worker'
import { findSamples, previewRecipe } from './preview-recipe'
import { readStamp } from './stamp-store'

let intake: IntakeScenario
let ids: number[]
beforeEach(async () => {
  intake = await makeIntake()
  for (const [seed, name] of ['north-1', 'north-2', 'south-1'].entries()) {
    await intake.deliver(`${name}_g.fits`, cutoutFits({ seed }))
    await intake.deliver(`${name}_r.fits`, cutoutFits({ seed: seed + 10 }))
  }
  await intake.read()
  ids = (await intake.db.selectFrom('candidate').select('id').orderBy('name').execute()).map(({ id }) => id)
})
afterEach(() => intake.remove())

const recipe = { ...defaultRecipe(['g', 'r', 'i']), views: ['colour', 'band:r', 'band:i'] }
const preview = (candidateIds: number[], own = recipe) =>
  previewRecipe(
    intake.db,
    intake.leadPermit,
    { runner: imageWorker, blobs: intake.tools.blobs },
    { recipe: own, candidateIds },
  )
const bytesOf = (url: string | null) => Buffer.from(url?.split(',')[1] ?? '', 'base64')

describe('a preview', () => {
  it('is the picture that the recipe would store, with its scale and its note', async () => {
    const [sample] = await preview([ids[0]])
    expect(sample).toMatchObject({ id: ids[0], name: 'north-1', fault: null })
    expect(sample.views.map(({ key, label, url }) => [key, label, url !== null])).toEqual([
      ['colour', 'Colour', true],
      ['band:r', 'r', true],
      ['band:i', 'i', false],
    ])
    expect(sample.views[0].geometry.pixelScaleArcsec).toBeCloseTo(0.2, 9)
    expect(sample.views[0].note).toContain('band i is missing')
    const stored = (await picturesOf(intake.db, intake.campaign, [ids[0]])).get(ids[0])
    const url = stored?.views.find(({ key }) => key === 'band:r')?.url ?? ''
    const bytes = await readStamp(intake.tools.stampFolder, url.split('/').at(-1) ?? '')
    expect(bytesOf(sample.views[1].url).equals(Buffer.from(bytes ?? []))).toBe(true)
  })

  it('follows the recipe and stores nothing', async () => {
    const stamps = () => intake.db.selectFrom('stamp').selectAll().execute()
    const before = await stamps()
    const [plain] = await preview([ids[0]])
    const [dark] = await preview([ids[0]], {
      ...recipe,
      band: { ...recipe.band, leastWhiteSigma: 3000, mostWhiteSigma: 3000 },
    })
    const mean = async (url: string | null) => (await sharp(bytesOf(url)).stats()).channels[0].mean
    expect(await mean(dark.views[1].url)).toBeLessThan((await mean(plain.views[1].url)) / 1.5)
    expect(await stamps()).toEqual(before)
    expect(await intake.db.selectFrom('recipe').selectAll().execute()).toHaveLength(3)
  })

  it('says which file is lost, of that candidate only', async () => {
    const file = await intake.db
      .selectFrom('file')
      .selectAll()
      .where('name', '=', 'north-1_g.fits')
      .executeTakeFirstOrThrow()
    rmSync(intake.tools.blobs.pathOf(file.sha256))
    const [lost, good] = await preview(ids.slice(0, 2))
    expect(lost.fault).toBe('north-1_g.fits can no longer be read on the server. Send it again under the same name.')
    expect(good.fault).toBeNull()
  })

  it('is refused for a candidate of another campaign', async () => {
    await expect(preview([ids[0], 999])).rejects.toMatchObject({ status: 404 })
    const other = { ...intake.leadPermit, campaign: intake.otherCampaign }
    const tools = { runner: imageWorker, blobs: intake.tools.blobs }
    await expect(previewRecipe(intake.db, other, tools, { recipe, candidateIds: [ids[0]] })).rejects.toMatchObject({
      status: 404,
    })
  })
})

describe('candidates to try a recipe on', () => {
  const names = async (name: string | null, count = 4) =>
    (await findSamples(intake.db, intake.leadPermit, { name, count })).map((sample) => sample.name)

  it('are drawn by lot, or found by a part of their name in any case', async () => {
    expect((await names(null)).sort()).toEqual(['north-1', 'north-2', 'south-1'])
    expect(await names(null, 2)).toHaveLength(2)
    expect(await names('NORTH')).toEqual(['north-1', 'north-2'])
    expect(await names('%')).toEqual([])
  })

  it('are of this campaign and have cutouts', async () => {
    await intake.db.deleteFrom('plane').where('candidate_id', '=', ids[0]).execute()
    expect((await names(null)).sort()).toEqual(['north-2', 'south-1'])
    const other = { ...intake.leadPermit, campaign: intake.otherCampaign }
    expect(await findSamples(intake.db, other, { name: null, count: 4 })).toEqual([])
  })
})
