import sharp from 'sharp'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { defaultRecipe } from '@/lib/science/imaging/recipe'
import { cutoutFits, wcsCards } from '@/tests/_support/cutouts'
import { makeIntake, type IntakeScenario } from '@/tests/_support/intake'
import { picturesOf } from './candidate-pictures'
import { changeRecipe } from './change-recipe'
import { imageCandidates } from './image-candidates'
import { readStamp } from './stamp-store'

let intake: IntakeScenario
beforeEach(async () => {
  intake = await makeIntake()
})
afterEach(() => intake.remove())

/** The WCS of the cutouts with its matrix times a factor: -1 turns it half round, 0.5 halves its pixels. */
const turned = (seed: number, factor: number) =>
  cutoutFits({
    seed,
    position: null,
    header: wcsCards(150.1, 2.2).map((card) =>
      /^CD/.test(card.keyword) ? { ...card, value: factor * Number(card.value) } : card,
    ),
  })

async function pictures() {
  const { id } = await intake.db.selectFrom('candidate').select('id').executeTakeFirstOrThrow()
  const found = (await picturesOf(intake.db, intake.campaign, [id])).get(id)
  if (!found) throw new Error('no pictures')
  return found
}
const viewOf = async (key: string) => {
  const view = (await pictures()).views.find((one) => one.key === key)
  if (!view?.url) throw new Error(`no ${key}`)
  const bytes = await readStamp(intake.tools.stampFolder, view.url.split('/').at(-1) ?? '')
  return {
    ...view,
    pixels: await sharp(bytes ?? undefined)
      .raw()
      .toBuffer(),
  }
}

describe('stamps of cutouts that do not lie north up', () => {
  it('are turned when the recipe asks for it, and their compass says so', async () => {
    await intake.deliver('SWS1_g.fits', turned(1, -1))
    await intake.read()
    const before = await viewOf('band:g')
    expect(Math.abs(before.geometry.northAngleDeg ?? 0)).toBeCloseTo(180, 4)
    const recipe = { ...defaultRecipe(['g', 'r', 'i']), northUp: true }
    await changeRecipe(intake.db, intake.leadPermit, { recipe, after: 2 })
    await imageCandidates(intake.tools, { campaignId: intake.campaign.id }, async () => {})
    const after = await viewOf('band:g')
    expect(after.geometry).toMatchObject({ northAngleDeg: 0, eastLeft: true })
    // Half a turn puts the last pixel first. The noise is estimated in another order: a level may differ by little.
    const apart = [...after.pixels].map((level, i) => Math.abs(level - (before.pixels.at(-1 - i) ?? Number.NaN)))
    expect(Math.max(...apart)).toBeLessThanOrEqual(2)
  })

  it('are turned without being asked where bands lie differently, and a note says so', async () => {
    await intake.deliver('SWS1_g.fits', turned(1, 1))
    await intake.deliver('SWS1_r.fits', turned(2, -1))
    await intake.read()
    expect((await viewOf('colour')).note).toContain('Turned north up: the bands lie differently on the sky.')
    expect((await pictures()).geometry).toMatchObject({ northAngleDeg: 0, eastLeft: true })
  })
})

describe('stamps of bands that differ in scale', () => {
  it('are combined on the finest grid, with a note, and each view has its own scale', async () => {
    await intake.deliver('SWS1_g.fits', turned(1, 1))
    await intake.deliver('SWS1_r.fits', turned(2, 0.5))
    await intake.read()
    const colour = await viewOf('colour')
    expect(colour.note).toContain('Resampled to the 0.1 arcsec pixels of r: g.')
    expect(colour.geometry.pixelScaleArcsec).toBeCloseTo(0.1, 6)
    expect((await viewOf('band:g')).geometry.pixelScaleArcsec).toBeCloseTo(0.2, 6)
    expect((await pictures()).geometry.pixelScaleArcsec).toBeNull()
  })
})
