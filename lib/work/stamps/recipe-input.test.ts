import { describe, expect, it } from 'vitest'
import { defaultRecipe, extraLimits, type Recipe } from '@/lib/science/imaging/recipe'
import { recipeInput } from './recipe-input'

const BANDS = ['g', 'r', 'i']
const plain = defaultRecipe(BANDS)
const whole: Recipe = { ...plain, ...extraLimits(plain), closeFieldArcsec: 12, northUp: true, weights: { g: 1.5 } }
const faults = (recipe: object, bands = BANDS) => {
  const parsed = recipeInput(bands).safeParse(recipe)
  return parsed.success ? [] : parsed.error.issues.map(({ path, message }) => `${path.join('.')}: ${message}`)
}

describe('a recipe that arrives', () => {
  it('is taken as it is, with and without the parts that came later', () => {
    expect(recipeInput(BANDS).parse(plain)).toEqual(plain)
    expect(recipeInput(BANDS).parse(whole)).toEqual(whole)
  })

  it.each([
    [{ views: [] }, 'views: Choose at least one view: without one there is nothing to judge.'],
    [{ views: ['deep', 'deep'] }, 'views: Each view is shown once.'],
    [{ views: ['deep', 'band:z', 'x'] }, 'views: Bands g, r, i do not make the view band:z, x.'],
    [{ weights: { z: 1 } }, 'weights: The campaign has no band z.'],
    [{ weights: { g: 0 } }, 'weights.g: The weight of a band is between 0.05 and 20.'],
    [{ closeFieldArcsec: 0 }, 'closeFieldArcsec: The close field, in arcsec, is between 0.5 and 600.'],
    [{ band: { ...plain.band, leastWhiteSigma: -2 } }, 'band.leastWhiteSigma: The least white must be above black.'],
    [
      { deep: { ...plain.deep, mostWhiteSigma: 3 } },
      'deep.mostWhiteSigma: The most white cannot be below the least white.',
    ],
    [{ colour: { ...plain.colour, softeningSigma: Number.NaN } }, 'colour.softeningSigma: The softening is a number.'],
  ])('is refused with %j', (change, sentence) => {
    expect(faults({ ...plain, ...change })).toEqual([sentence])
  })

  it('is refused with a part that nobody knows, and with colours of one band', () => {
    expect(faults({ ...plain, gamma: 2 })[0]).toContain('gamma')
    expect(faults({ ...defaultRecipe(['VIS']), views: ['colour'] }, ['VIS'])).toEqual([
      'views: Bands VIS do not make the view colour.',
    ])
  })
})
