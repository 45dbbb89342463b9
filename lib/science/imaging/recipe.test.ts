import { describe, expect, it } from 'vitest'
import { bandOfView, canonicalRecipe, defaultRecipe, viewsOf } from './recipe'

describe('a recipe', () => {
  it('wants the views of all bands first, then each band in the order of the bands', () => {
    const recipe = defaultRecipe(['g', 'r', 'i'])
    expect(viewsOf(recipe, ['g', 'r', 'i'])).toEqual([
      { key: 'colour', label: 'Colour' },
      { key: 'deep', label: 'Deep' },
      { key: 'residual', label: 'Lens removed' },
      { key: 'blue', label: 'Blue only' },
      { key: 'core', label: 'Bright core' },
      { key: 'band:g', label: 'g' },
      { key: 'band:r', label: 'r' },
      { key: 'band:i', label: 'i' },
    ])
  })

  it('has no view of colours for one band', () => {
    expect(viewsOf(defaultRecipe(['VIS']), ['VIS']).map((view) => view.key)).toEqual(['deep', 'residual', 'band:VIS'])
  })

  it('names no view of a band that is not there, and no view it does not know', () => {
    const recipe = { ...defaultRecipe(['g', 'r']), views: ['something', 'band:r', 'colour', 'band:z'] }
    expect(viewsOf(recipe, ['g', 'r']).map((view) => view.key)).toEqual(['band:r', 'colour'])
    expect(viewsOf(recipe, [])).toEqual([])
  })

  it('has one text whatever the order of its keys, and another when a number changes', () => {
    const recipe = { ...defaultRecipe(['g', 'r']), weights: { r: 1, g: 2 } }
    const turned = Object.fromEntries(Object.entries({ ...recipe, weights: { g: 2, r: 1 } }).reverse())
    expect(canonicalRecipe(turned as unknown as typeof recipe)).toBe(canonicalRecipe(recipe))
    expect(JSON.parse(canonicalRecipe(recipe))).toEqual(recipe)
    const harder = { ...recipe, deep: { ...recipe.deep, softeningSigma: 1 } }
    expect(canonicalRecipe(harder)).not.toBe(canonicalRecipe(recipe))
  })

  it('keeps the order of views, which is part of it', () => {
    const recipe = defaultRecipe(['g', 'r'])
    expect(canonicalRecipe({ ...recipe, views: [...recipe.views].reverse() })).not.toBe(canonicalRecipe(recipe))
  })

  it('knows the band of a band view, also of a band with a colon in its name', () => {
    expect(bandOfView('band:g')).toBe('g')
    expect(bandOfView('band:a:b')).toBe('a:b')
    expect(bandOfView('colour')).toBeNull()
  })
})
