import { describe, expect, it } from 'vitest'
import { defaultRecipe } from '@/lib/science/imaging/recipe'
import { LIMIT_SCALES, PLACES, placeOf, valueAt } from './limit-scales'
import { changedParts, limitsKeyOf, moveView, possibleViews, sameRecipe, toggleView, wholeRecipe } from './recipe-draft'

const BANDS = ['g', 'r', 'i']
const whole = wholeRecipe(defaultRecipe(BANDS), BANDS)

describe('a recipe being edited', () => {
  it('spells out what a stored one leaves open, and is the same recipe', () => {
    expect(whole).toMatchObject({ northUp: false, closeFieldArcsec: 12, weights: { g: 1, r: 1, i: 1 } })
    expect(whole.residual.softeningSigma).toBe(5)
    expect(changedParts(defaultRecipe(BANDS), whole, BANDS)).toEqual([])
    expect(sameRecipe(wholeRecipe(whole, BANDS), whole)).toBe(true)
  })

  it('moves a view one place, not beyond the ends', () => {
    expect(moveView(whole, 'deep', -1).views.slice(0, 2)).toEqual(['deep', 'colour'])
    expect(moveView(whole, 'colour', -1)).toBe(whole)
    expect(moveView(whole, 'band:i', 1)).toBe(whole)
    expect(moveView(whole, 'unknown', 1)).toBe(whole)
  })

  it('leaves a view out and takes it back at the end, but never the last one', () => {
    const without = toggleView(whole, 'blue')
    expect(without.views).not.toContain('blue')
    expect(toggleView(without, 'blue').views.at(-1)).toBe('blue')
    const one = { ...whole, views: ['deep'] }
    expect(toggleView(one, 'deep')).toBe(one)
  })

  it('knows every view that the bands can make, those that are not shown too', () => {
    const some = possibleViews({ ...whole, views: ['band:r', 'deep'] }, BANDS)
    expect(some.map(({ key, shown }) => (shown ? key : `(${key})`))).toEqual([
      'band:r',
      'deep',
      '(colour)',
      '(residual)',
      '(blue)',
      '(core)',
      '(band:g)',
      '(band:i)',
    ])
    expect(possibleViews(defaultRecipe(['VIS']), ['VIS']).map(({ key }) => key)).toEqual([
      'deep',
      'residual',
      'band:VIS',
    ])
  })

  it('tunes all bands together', () => {
    expect([limitsKeyOf('band:g'), limitsKeyOf('blue')]).toEqual(['band', 'blue'])
  })

  it('says in which parts two versions differ', () => {
    const other = { ...whole, northUp: true, weights: { ...whole.weights, g: 2 }, views: ['deep'] }
    expect(changedParts(whole, other, BANDS)).toEqual(['views', 'weights', 'north up'])
  })
})

describe('a slider', () => {
  it.each(LIMIT_SCALES)('of $label reaches both its ends and comes back from where it is', (scale) => {
    expect(valueAt(0, scale)).toBeCloseTo(scale.least, scale.digits)
    expect(valueAt(PLACES, scale)).toBeCloseTo(scale.most, scale.digits)
    for (const place of [50, 100, 150]) expect(Math.abs(placeOf(valueAt(place, scale), scale) - place)).toBeLessThan(3)
  })

  it('stands at its end for a value beyond it', () => {
    expect(placeOf(1e6, LIMIT_SCALES[1])).toBe(PLACES)
    expect(placeOf(0.001, LIMIT_SCALES[1])).toBe(0)
  })
})
