import { describe, expect, it } from 'vitest'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import { estimateNoise } from './noise'
import type { BandPlane } from './normalise-planes'
import { defaultRecipe } from './recipe'
import { renderViews } from './render-views'

const bands = ['g', 'r', 'i']
const { bands: simulated, width, height, pixelScaleArcsec } = simulateCandidate('lens-arc', 5)
const plain: BandPlane[] = simulated.map(({ band, data }) => ({ band, width, height, data, pixelScaleArcsec }))
const measured = (given: BandPlane[]): BandPlane[] =>
  given.map((plane) => ({ ...plane, sky: estimateNoise(plane.data, plane.width, plane.height) }))

const turned = plain.map((plane) => ({ ...plane, orientation: { northAngleDeg: 30, eastLeft: true } }))
const unequal = plain.map((plane, k) => (k === 1 ? { ...plane, pixelScaleArcsec: 1.5 * pixelScaleArcsec } : plane))

describe('planes whose sky is known', () => {
  it.each([
    ['as they are', plain, false],
    ['turned north up', turned, true],
    ['brought to one scale', unequal, false],
  ])('give the same pictures as those whose sky is measured again: %s', (_name, given, northUp) => {
    const recipe = { ...defaultRecipe(bands), northUp }
    expect(renderViews(measured(given), recipe)).toEqual(renderViews(given, recipe))
  })

  it('are drawn by what is known of them', () => {
    const recipe = { ...defaultRecipe(bands), views: ['band:g'] }
    const [view] = renderViews(
      plain.map((plane) => ({ ...plane, sky: { background: 1e9, sigma: 1, finiteFraction: 1 } })),
      recipe,
    )
    expect(Math.max(...view.pixels)).toBe(0)
  })
})
