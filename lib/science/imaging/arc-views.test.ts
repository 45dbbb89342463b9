import { describe, expect, it } from 'vitest'
import { simulateWithTruth, type SimulatedKind } from '@/lib/science/lensing/simulate-candidate'
import { closeFieldOf, defaultRecipe, type Recipe } from './recipe'
import { MISSING_GREY } from './render-grey'
import { renderViews, type BandPlane, type RenderedView } from './render-views'

const BANDS = ['g', 'r', 'i']
const recipe = defaultRecipe(BANDS)

function candidate(kind: SimulatedKind, seed: number) {
  const { candidate: made, truth } = simulateWithTruth(kind, seed)
  const planes = made.bands.map(({ band, data }): BandPlane => ({ band, width: 80, height: 80, data }))
  return { planes, truth }
}

const find = (views: RenderedView[], key: string): RenderedView => {
  const view = views.find((one) => one.key === key)
  if (!view) throw new Error(`no view ${key}`)
  return view
}

/** Mean brightness (of the brightest channel) over the pixels chosen, given as in the planes, row 0 = bottom. */
function brightness({ pixels, channels, width, height }: RenderedView, chosen: (i: number) => boolean): number {
  let sum = 0
  let count = 0
  for (let i = 0; i < width * height; i++) {
    if (!chosen(i)) continue
    const at = channels * ((height - 1 - Math.floor(i / width)) * width + (i % width))
    sum += Math.max(...pixels.subarray(at, at + channels))
    count++
  }
  return sum / count
}

const nearMiddle = (i: number) => Math.hypot((i % 80) - 39.5, Math.floor(i / 80) - 39.5) < 2.5

describe('the views in which arcs show', () => {
  const { planes, truth } = candidate('lens-ring', 3)
  const views = renderViews(planes, recipe)
  const onRing = (i: number) => truth[0].lensed[i] > 4

  it.each(['residual', 'blue'])('show the ring bright and the galaxy dark: %s', (key) => {
    const view = find(views, key)
    expect(brightness(find(views, 'colour'), nearMiddle)).toBeGreaterThan(brightness(find(views, 'colour'), onRing))
    expect(brightness(view, onRing)).toBeGreaterThan(100)
    expect(brightness(view, nearMiddle)).toBeLessThan(0.6 * brightness(view, onRing))
  })

  it('show the ring blue in colour when the lens is removed', () => {
    const { pixels } = find(views, 'residual')
    let red = 0
    let blue = 0
    for (let i = 0; i < 6400; i++) {
      if (!onRing(i)) continue
      const at = 3 * ((79 - Math.floor(i / 80)) * 80 + (i % 80))
      red += pixels[at]
      blue += pixels[at + 2]
    }
    expect(blue).toBeGreaterThan(1.2 * red)
  })

  it('show what a bright core hides: it is not white in the view for it, and the sky is black', () => {
    const bright = renderViews(candidate('elliptical', 5).planes, recipe)
    const corePixels = find(bright, 'core').pixels
    const white = (pixels: Uint8Array) => pixels.reduce((count, value) => count + (value >= 250 ? 1 : 0), 0)
    expect(white(corePixels)).toBeLessThan(0.6 * white(find(bright, 'colour').pixels))
    expect(brightness(find(bright, 'core'), (i) => i < 800)).toBeLessThan(12)
  })

  it.each([1e-13, 1e4])('look the same in units of %s', (factor) => {
    const others = renderViews(
      planes.map((plane) => ({ ...plane, data: plane.data.map((value) => value * factor) })),
      recipe,
    )
    for (const key of ['residual', 'blue', 'core']) {
      const pixels = find(others, key).pixels
      const difference = find(views, key).pixels.reduce((sum, value, i) => sum + Math.abs(value - pixels[i]), 0)
      expect(difference / pixels.length).toBeLessThan(1.5)
    }
  })
})

describe('recipes stored before these views existed', () => {
  const stored = JSON.parse(
    JSON.stringify({ ...recipe, views: ['colour', 'deep', 'band:g', 'band:r', 'band:i'] }),
  ) as Recipe

  it('give the views that they name and no others', () => {
    expect(renderViews(candidate('lens-arc', 1).planes, stored).map((view) => view.key)).toEqual(stored.views)
  })

  it('may name the new views without saying how: the usual limits hold', () => {
    const { planes } = candidate('lens-arc', 1)
    const named = { ...stored, views: ['residual', 'blue', 'core'] }
    const usual = renderViews(planes, recipe).filter((view) => named.views.includes(view.key))
    expect(renderViews(planes, named)).toEqual(usual)
    expect(closeFieldOf(stored)).toBe(12)
    expect(closeFieldOf({ ...stored, closeFieldArcsec: 8 })).toBe(8)
  })

  it('may say how, and then their own limits hold', () => {
    const { planes } = candidate('lens-arc', 1)
    const limits = { ...recipe.deep, softeningSigma: 40, mostWhiteSigma: 3000, leastWhiteSigma: 3000 }
    const dark = renderViews(planes, { ...stored, views: ['blue'], blue: limits })
    expect(brightness(dark[0], () => true)).toBeLessThan(10)
  })
})

describe('bands that are missing or do not fit', () => {
  const { planes } = candidate('lens-arc', 2)

  it('are named in each of these views', () => {
    const views = renderViews(planes.slice(1), recipe)
    for (const key of ['residual', 'blue', 'core']) {
      expect(find(views, key).note).toContain('Made of r, i only: band g is missing.')
    }
  })

  it('leave one band, of which there is a grey residual and neither blue nor core', () => {
    const views = renderViews([planes[1]], defaultRecipe(['r']))
    expect(views.map((view) => [view.key, view.channels])).toEqual([
      ['deep', 1],
      ['residual', 1],
      ['band:r', 1],
    ])
  })

  it('are brought to one grid when their scales are known, and the note says so', () => {
    const half = (plane: BandPlane): BandPlane => ({
      ...plane,
      width: 40,
      height: 40,
      pixelScaleArcsec: 0.4,
      data: Float32Array.from({ length: 1600 }, (_, i) => {
        const at = 2 * Math.floor(i / 40) * 80 + 2 * (i % 40)
        return plane.data[at] + plane.data[at + 1] + plane.data[at + 80] + plane.data[at + 81]
      }),
    })
    const scaled = planes.map((plane) => ({ ...plane, pixelScaleArcsec: 0.2 }))
    const views = renderViews([scaled[0], scaled[1], half(scaled[2])], recipe)
    const colour = find(views, 'colour')
    expect(colour.width).toBe(80)
    expect(colour.note).toBe('Resampled to the 0.2 arcsec pixels of g: i.')
    expect(find(views, 'residual').note).toContain('Resampled to the 0.2 arcsec pixels of g: i.')
    expect(find(views, 'band:i').width).toBe(40)
    const plain = find(renderViews(planes, recipe), 'colour')
    const difference = plain.pixels.reduce((sum, value, i) => sum + Math.abs(value - colour.pixels[i]), 0)
    expect(difference / plain.pixels.length).toBeLessThan(8)
  })

  it('that are saturated in the core have no colour there, and the note says so', () => {
    const full = candidate('elliptical', 1005).planes.map((plane, k) =>
      k === 2 ? { ...plane, data: plane.data.map((value) => Math.min(value, 0.5 * Math.max(...plane.data))) } : plane,
    )
    const blue = find(renderViews(full, recipe), 'blue')
    expect(blue.note).toBe('The core is saturated: no colour there, drawn as flat grey.')
    expect(blue.pixels[39 * 80 + 40]).toBe(MISSING_GREY)
  })

  it('have gaps that are drawn grey and named', () => {
    const gappy = planes.map((plane, k) =>
      k === 1 ? { ...plane, data: plane.data.slice().fill(Number.NaN, 0, 800) } : plane,
    )
    const { pixels, note } = find(renderViews(gappy, recipe), 'residual')
    expect(note).toContain('No data in 13 % of r, drawn as flat grey.')
    expect(new Set(pixels.subarray(3 * 5600))).toEqual(new Set([MISSING_GREY]))
  })
})
