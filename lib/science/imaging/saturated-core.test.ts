import { describe, expect, it } from 'vitest'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import type { BandPlane } from './normalise-planes'
import { defaultRecipe } from './recipe'
import { renderViews } from './render-views'

const { bands, width, height, pixelScaleArcsec } = simulateCandidate('elliptical', 4)

/** The bands, some of them cut at a share of their brightest pixel. */
function cut(shares: Record<string, number>): BandPlane[] {
  return bands.map(({ band, data }) => {
    const most = (shares[band] ?? 1) * data.reduce((largest, value) => Math.max(largest, value), 0)
    return { band, width, height, pixelScaleArcsec, data: data.map((value) => Math.min(value, most)) }
  })
}

const notes = (planes: BandPlane[]): Record<string, string | null> =>
  Object.fromEntries(renderViews(planes, defaultRecipe(['g', 'r', 'i'])).map(({ key, note }) => [key, note]))

describe('a core that is cut at one level', () => {
  it('is told at every view of colour, with the bands, and taken off by no model', () => {
    const told = notes(cut({ r: 0.4, i: 0.4 }))
    expect(told.colour).toContain('saturated in r, i')
    expect(told.core).toContain('saturated in r, i')
    expect(told.residual).toContain('saturated in r, i')
    expect(told['band:g']).toBeNull()
  })

  it('is not told of a core that comes to a point', () => {
    const told = notes(cut({}))
    expect(told.colour).toBeNull()
    expect(told.core).toBeNull()
  })
})
