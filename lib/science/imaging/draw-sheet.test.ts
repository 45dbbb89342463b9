/** Pictures drawn from coded planes are those of the recipe; see render-views.test.ts for what those are checked against. */
import { describe, expect, it } from 'vitest'
import { SIMULATED_KINDS, simulateCandidate } from '../lensing/simulate-candidate'
import { derivedPlanes } from './derived-planes'
import { drawSheet, type DrawOptions } from './draw-sheet'
import { decodePlanes, encodePlanes, type PlaneToEncode } from './plane-codec'
import { estimateNoise } from './noise'
import type { BandPlane } from './normalise-planes'
import { defaultRecipe, type Recipe } from './recipe'
import { MISSING_GREY } from './render-grey'
import { renderViews } from './render-views'
import { viewSheet, viewSource, type ViewSheet } from './view-sheet'

/** A simulated lens, its noise brought to about `unit`. */
function usualCandidate(unit: number): BandPlane[] {
  const { bands, width, height } = simulateCandidate('lens-arc', 3)
  const factor = unit / estimateNoise(bands[1].data, width, height).sigma
  return bands.map(({ band, data }) => ({ band, width, height, data: data.map((value) => value * factor) }))
}

function coded(planes: BandPlane[], recipe: Recipe) {
  const bands = planes.map((plane): PlaneToEncode => {
    const { background, sigma: noise } = estimateNoise(plane.data, plane.width, plane.height)
    return { role: 'band', ...plane, background, noise, pixelScaleArcsec: plane.pixelScaleArcsec ?? null }
  })
  const { planes: made, clipped } = derivedPlanes(planes, recipe)
  const derived = made.map(({ role, plane }): PlaneToEncode => {
    const { band, width, height, values: data, sigma } = plane
    return { role, band, width, height, data, background: 0, noise: 1, bandNoise: sigma, pixelScaleArcsec: null }
  })
  return decodePlanes(encodePlanes([...bands, ...derived], recipe, clipped))
}

/** The middle of a plane, `side` pixels wide and high. */
function cropOf(plane: BandPlane, side: number): BandPlane {
  const left = Math.floor((plane.width - side) / 2)
  const bottom = Math.floor((plane.height - side) / 2)
  const data = Float32Array.from({ length: side * side }, (_, i) => {
    return plane.data[(bottom + Math.floor(i / side)) * plane.width + left + (i % side)]
  })
  return { ...plane, width: side, height: side, data }
}

const limitsOf = ({ blackSigma, whiteSigma, softeningSigma }: ViewSheet): DrawOptions => ({
  blackSigma,
  whiteSigma,
  softeningSigma,
  curve: 'asinh',
  invert: false,
})

function draw(sheet: ViewSheet, options: Partial<DrawOptions> = {}): Uint8ClampedArray {
  const pixels = new Uint8ClampedArray(4 * sheet.width * sheet.height)
  drawSheet(sheet, { ...limitsOf(sheet), ...options }, pixels)
  return pixels
}

function sheetOf(key: string, planes: BandPlane[], recipe = defaultRecipe(['g', 'r', 'i'])): ViewSheet {
  const decoded = coded(planes, recipe)
  const source = viewSource(key, decoded.planes, decoded.recipe)
  if (!source) throw new Error(`No source of ${key}`)
  return viewSheet(source, decoded.recipe)
}

/** The largest difference of a channel, in counts. */
function difference(live: Uint8ClampedArray, pixels: Uint8Array, channels: number) {
  let worst = 0
  for (let i = 0; i < pixels.length; i++) {
    const at = channels === 3 ? 4 * Math.floor(i / 3) + (i % 3) : 4 * i
    worst = Math.max(worst, Math.abs(live[at] - pixels[i]))
  }
  return worst
}

describe.each([1e-13, 1, 1e4])('at the recipe’s own limits, with noise of %s', (unit) => {
  const planes = usualCandidate(unit)
  const recipe = defaultRecipe(['g', 'r', 'i'])
  const pictures = renderViews(planes, recipe)

  it.each(pictures.map((view) => [view.key, view] as const))(
    '%s is the PNG’s picture within two counts',
    (key, view) => {
      const sheet = sheetOf(key, planes)
      expect([sheet.width, sheet.height, sheet.colour]).toEqual([view.width, view.height, view.channels === 3])
      expect(difference(draw(sheet), view.pixels, view.channels)).toBeLessThanOrEqual(2)
    },
  )
})

describe.each(SIMULATED_KINDS)('of %s', (kind) => {
  const { bands, width, height } = simulateCandidate(kind, 2)
  const planes = bands.map(({ band, data }) => ({ band, width, height, data }))

  it('every view is the PNG’s picture within two counts', () => {
    for (const view of renderViews(planes, defaultRecipe(['g', 'r', 'i']))) {
      expect([view.key, difference(draw(sheetOf(view.key, planes)), view.pixels, view.channels)]).toSatisfy(
        ([, worst]: [string, number]) => worst <= 2,
      )
    }
  })
})

describe('of a core that is cut in some bands', () => {
  const planes = usualCandidate(1).map((plane, k) => {
    const most = [1, 0.4, 0.25][k] * plane.data.reduce((largest, value) => Math.max(largest, value), 0)
    return { ...plane, data: plane.data.map((value) => Math.min(value, most)) }
  })

  it.each([{}, { weights: { g: 2 } }])('every view is the PNG’s picture within two counts, with %s', (other) => {
    const recipe = { ...defaultRecipe(['g', 'r', 'i']), ...other }
    const pictures = renderViews(planes, recipe)
    expect(pictures[0].note).toContain('saturated in r, i')
    for (const view of pictures) {
      const drawn = draw(sheetOf(view.key, planes, recipe))
      expect(difference(drawn, view.pixels, view.channels), view.key).toBeLessThanOrEqual(2)
    }
  })

  it('bands on grids of their own are the PNG’s picture too', () => {
    const coarse = cropOf(planes[2], 60)
    const mixed = [planes[0], planes[1], coarse].map((plane) => ({
      ...plane,
      pixelScaleArcsec: plane === coarse ? 0.3 : 0.2,
    }))
    const recipe = defaultRecipe(['g', 'r', 'i'])
    const [view] = renderViews(mixed, recipe)
    expect(view.note).toContain('saturated')
    expect(difference(draw(sheetOf('colour', mixed)), view.pixels, 3)).toBeLessThanOrEqual(3)
  })
})

describe('a sheet', () => {
  it('keeps pixels without data flat grey, in grey and in colour', () => {
    const planes = usualCandidate(1)
    planes[1].data.fill(Number.NaN, 0, 100)
    const recipe = defaultRecipe(['g', 'r', 'i'])
    for (const view of renderViews(planes, recipe).filter(({ key }) => key === 'colour' || key === 'band:r')) {
      const pixels = draw(sheetOf(view.key, planes))
      expect(difference(pixels, view.pixels, view.channels)).toBeLessThanOrEqual(2)
      // Row 0 = bottom, so the first pixels of the plane are in the last row of the picture.
      expect(pixels[4 * (view.height - 1) * view.width]).toBe(MISSING_GREY)
    }
  })

  it('is made of the bands of one size, each band’s own view of its own', () => {
    const planes = usualCandidate(1)
    const small = { ...planes[2], width: 10, height: 10, data: planes[2].data.slice(0, 100) }
    const mixed = [planes[0], planes[1], small]
    expect(sheetOf('colour', mixed)).toMatchObject({ width: planes[0].width })
    expect(sheetOf('band:i', mixed)).toMatchObject({ width: 10, height: 10 })
  })

  it('does not exist where there is nothing to see', () => {
    const recipe = defaultRecipe(['g'])
    const empty = { band: 'g', width: 8, height: 8, data: new Float32Array(64).fill(3) }
    const { planes } = coded([empty], recipe)
    for (const key of ['colour', 'deep', 'residual', 'band:g', 'band:r', 'unheard of']) {
      expect(viewSource(key, planes, recipe)).toBeNull()
    }
  })

  it('gets darker with black, brighter with a lower white, and the other way round inverted', () => {
    const sheet = sheetOf('band:g', usualCandidate(1))
    const mean = (options: Partial<DrawOptions>) => {
      const pixels = draw(sheet, options)
      return pixels.reduce((sum, value, i) => (i % 4 === 3 ? sum : sum + value), 0) / (0.75 * pixels.length)
    }
    const usual = mean({})
    expect(mean({ blackSigma: 2 })).toBeLessThan(usual)
    expect(mean({ whiteSigma: sheet.whiteSigma / 3 })).toBeGreaterThan(usual)
    expect(mean({ softeningSigma: 40 })).toBeLessThan(usual)
    expect(mean({ curve: 'linear' })).toBeLessThan(usual)
    expect(mean({ invert: true })).toBeCloseTo(255 - usual, 6)
  })

  it('stays a picture when white is set below black', () => {
    const pixels = draw(sheetOf('colour', usualCandidate(1)), { blackSigma: 5, whiteSigma: 1 })
    expect(new Set(pixels).size).toBeGreaterThan(2)
  })

  it('leaves a band out of the colours whose weight is 0', () => {
    const planes = usualCandidate(1)
    const recipe = defaultRecipe(['g', 'r', 'i'])
    const decoded = coded(planes, recipe)
    const source = viewSource('colour', decoded.planes, recipe)
    if (!source) throw new Error('No colour')
    const sheet = viewSheet(source, { ...recipe, weights: { i: 0 } })
    const [own] = renderViews(planes, { ...recipe, weights: { i: 0 } })
    expect(difference(draw(sheet), own.pixels, 3)).toBeLessThanOrEqual(2)
  })
})
