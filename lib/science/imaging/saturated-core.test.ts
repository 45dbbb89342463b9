import { describe, expect, it } from 'vitest'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import type { BandPlane } from './normalise-planes'
import { defaultRecipe, type Recipe } from './recipe'
import { renderViews } from './render-views'

const { bands, width, height, pixelScaleArcsec } = simulateCandidate('elliptical', 4)
const RECIPE = defaultRecipe(['g', 'r', 'i'])

/** The bands, some of them cut at a share of their brightest pixel. */
function cut(shares: Record<string, number>): BandPlane[] {
  return bands.map(({ band, data }) => {
    const most = (shares[band] ?? 1) * data.reduce((largest, value) => Math.max(largest, value), 0)
    return { band, width, height, pixelScaleArcsec, data: data.map((value) => Math.min(value, most)) }
  })
}

const notes = (planes: BandPlane[], recipe: Recipe = RECIPE): Record<string, string | null> =>
  Object.fromEntries(renderViews(planes, recipe).map(({ key, note }) => [key, note]))

/** Red, green and blue at a place of a view, counted from the middle, row 0 = top. */
function counts(planes: BandPlane[], key: string, across = 0, down = 0, recipe: Recipe = RECIPE): number[] {
  const view = renderViews(planes, recipe).find((one) => one.key === key)
  const at = 3 * ((height / 2 + down) * width + width / 2 + across)
  return [...(view?.pixels.subarray(at, at + 3) ?? [])]
}

const spread = (rgb: number[]): number => Math.max(...rgb) - Math.min(...rgb)

describe('a core that is cut at one level', () => {
  it('is told at every view of colour, with the bands, and taken off by no model', () => {
    const told = notes(cut({ r: 0.4, i: 0.4 }))
    expect(told.colour).toContain('The middle is saturated in r, i: drawn without colour there.')
    expect(told.core).toContain('saturated in r, i')
    expect(told.residual).toContain('saturated in r, i')
    expect(told['band:g']).toBeNull()
  })

  it('is not told of a core that comes to a point', () => {
    const told = notes(cut({}))
    expect(told.colour).toBeNull()
    expect(told.core).toBeNull()
  })

  it.each(['colour', 'core'])('has no hue in %s, and is no darker than the brightest channel was', (key) => {
    const planes = cut({ i: 0.25 })
    const earlier = counts(planes, key, 0, 0, { ...RECIPE, version: 1 })
    const now = counts(planes, key)
    expect(spread(earlier)).toBeGreaterThan(20)
    expect(spread(now)).toBeLessThanOrEqual(1)
    expect(now[0]).toBeGreaterThanOrEqual(Math.max(...earlier) - 1)
  })

  it('leaves all that is away from it as it was', () => {
    const planes = cut({ i: 0.25 })
    for (const [across, down] of [
      [12, 0],
      [0, -12],
      [-9, 9],
    ]) {
      const earlier = counts(planes, 'colour', across, down, { ...RECIPE, version: 1 })
      const now = counts(planes, 'colour', across, down)
      now.forEach((count, k) => expect(Math.abs(count - earlier[k])).toBeLessThanOrEqual(2))
    }
  })

  it('changes no pixel where nothing is cut', () => {
    const earlier = renderViews(cut({}), { ...RECIPE, version: 1 })
    expect(renderViews(cut({}), RECIPE)).toEqual(earlier)
  })

  it('off the middle is told as such', () => {
    const planes = cut({})
    const [{ data }] = planes
    const most = 3 * data.reduce((largest, value) => Math.max(largest, value), 0)
    for (let row = 8; row < 13; row++) data.fill(most, row * width + 8, row * width + 13)
    expect(notes(planes).colour).toBe('An object off the middle is saturated in g: drawn without colour there.')
  })

  it('keeps its hue under a recipe of the earlier drawing, whose note says that it is not real', () => {
    expect(notes(cut({ r: 0.4, i: 0.4 }), { ...RECIPE, version: 1 }).colour).toContain('its colour is not real')
  })
})
