import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { simulateCandidate } from '@/lib/science/lensing/simulate-candidate'
import { channelWeights, colourBalance } from './colour-channels'
import { defaultRecipe, extraLimits } from './recipe'
import { MISSING_GREY } from './render-grey'
import { renderViews, type BandPlane, type RenderedView } from './render-views'

const BANDS = ['g', 'r', 'i']
const recipe = defaultRecipe(BANDS)

function lens(seed = 3): BandPlane[] {
  const { bands, width, height } = simulateCandidate('lens-arc', seed)
  return bands.map(({ band, data }) => ({ band, width, height, data }))
}

/** Noise of 1 round 0, and a blob of the given peak, one pixel wide, at (x, y) counted from the bottom left. */
function blob(band: string, peak: number, x = 20, y = 20, size = 40, seed = 1): BandPlane {
  const random = new SeededRandom(seed * 31 + band.charCodeAt(0))
  const data = Float32Array.from({ length: size * size }, (_, i) => {
    const square = ((i % size) - x) ** 2 + (Math.floor(i / size) - y) ** 2
    return random.normal() + peak * Math.exp(-square / 8)
  })
  return { band, width: size, height: size, data }
}

const find = (views: RenderedView[], key: string): RenderedView => {
  const view = views.find((candidate) => candidate.key === key)
  if (!view) throw new Error(`no view ${key}`)
  return view
}

const rgbAt = ({ pixels, width }: RenderedView, x: number, yFromTop: number) => [
  ...pixels.subarray(3 * (yFromTop * width + x), 3 * (yFromTop * width + x) + 3),
]

const scaled = (planes: BandPlane[], factor: number, offset = 0): BandPlane[] =>
  planes.map((plane) => ({ ...plane, data: plane.data.map((value) => value * factor + offset) }))

const withData = (plane: BandPlane, change: (data: Float32Array) => void): BandPlane => {
  const data = plane.data.slice()
  change(data)
  return { ...plane, data }
}

describe('the views of a candidate', () => {
  it('come in the order of the recipe, in native size, without notes when nothing is wrong', () => {
    const views = renderViews(lens(), recipe)
    expect(views.map((view) => [view.key, view.channels, view.pixels.length, view.note])).toEqual([
      ['colour', 3, 19200, null],
      ['deep', 1, 6400, null],
      ['residual', 3, 19200, null],
      ['blue', 1, 6400, null],
      ['core', 3, 19200, null],
      ['band:g', 1, 6400, null],
      ['band:r', 1, 6400, null],
      ['band:i', 1, 6400, null],
    ])
  })

  it('show the bottom row of the data at the bottom of the picture', () => {
    const views = renderViews(
      BANDS.map((band) => blob(band, 100, 5, 2)),
      recipe,
    )
    for (const key of ['deep', 'band:g', 'band:r', 'band:i']) {
      const { pixels } = find(views, key)
      expect(pixels.indexOf(Math.max(...pixels)) % 40).toBeLessThan(9)
      expect(pixels[37 * 40 + 5]).toBeGreaterThan(200)
      expect(pixels[2 * 40 + 5]).toBeLessThan(150)
    }
    expect(Math.max(...rgbAt(find(views, 'colour'), 5, 37))).toBeGreaterThan(150)
    expect(Math.max(...rgbAt(find(views, 'colour'), 5, 2))).toBeLessThan(60)
  })

  // Surveys deliver anything from erg/s/cm^2/Hz-like 1e-13 to counts of 1e4, with and without sky.
  it.each([
    [1e-13, 0],
    [1e4, 0],
    [1, 500],
    [1e-13, 1e-11],
  ])('look the same in units of %s with a sky of %s', (factor, offset) => {
    const plain = renderViews(lens(), recipe)
    const other = renderViews(scaled(lens(), factor, offset), recipe)
    plain.forEach((view, k) => {
      const differences = view.pixels.map((value, i) => Math.abs(value - other[k].pixels[i]))
      expect(differences.reduce((sum, value) => sum + value, 0) / differences.length).toBeLessThan(1)
    })
  })

  it('are the same twice', () => {
    expect(renderViews(lens(), recipe)).toEqual(renderViews(lens(), recipe))
  })

  it('leave the planes they are made of as they were', () => {
    const planes = lens()
    const before = planes.map((plane) => plane.data.slice())
    renderViews(planes, recipe)
    planes.forEach((plane, k) => expect(plane.data).toEqual(before[k]))
  })
})

describe('the colour view', () => {
  it('shows what is brighter in the longest band red and in the shortest blue', () => {
    const red = renderViews([blob('g', 10), blob('r', 40), blob('i', 90)], recipe)
    const [r, g, b] = rgbAt(find(red, 'colour'), 20, 19)
    expect(r).toBeGreaterThan(g)
    expect(g).toBeGreaterThan(b)
    const blue = renderViews([blob('g', 90), blob('r', 70), blob('i', 50)], recipe)
    const [r2, g2, b2] = rgbAt(find(blue, 'colour'), 20, 19)
    expect(b2).toBeGreaterThan(g2)
    expect(g2).toBeGreaterThan(r2)
  })

  it('keeps the sky near black, with noise that is nearly grey', () => {
    const { pixels } = find(renderViews([blob('g', 0), blob('r', 0), blob('i', 0)], recipe), 'colour')
    let brightness = 0
    let saturation = 0
    for (let i = 0; i < pixels.length; i += 3) {
      const [r, g, b] = pixels.subarray(i, i + 3)
      brightness += Math.max(r, g, b)
      saturation += Math.max(r, g, b) - Math.min(r, g, b)
    }
    expect(brightness / 1600).toBeLessThan(32)
    expect(saturation / brightness).toBeLessThan(0.2)
  })

  it('is made of two bands with their mean as green', () => {
    const views = renderViews([blob('g', 90), blob('i', 30)], defaultRecipe(['g', 'i']))
    const [r, g, b] = rgbAt(find(views, 'colour'), 20, 19)
    expect(b).toBeGreaterThan(g)
    expect(g).toBeGreaterThan(r)
    expect(find(views, 'colour').note).toBeNull()
  })

  it('does not exist for one band, and the note says so', () => {
    const views = renderViews([blob('VIS', 50)], { ...defaultRecipe(['VIS']), views: ['colour', 'deep', 'band:VIS'] })
    expect(views.map((view) => view.key)).toEqual(['deep', 'band:VIS'])
    expect(views[0].note).toBe('No colour view: it needs at least two bands.')
  })

  it('takes more weight from a band when the recipe says so', () => {
    const planes = [blob('g', 50), blob('r', 50), blob('i', 50)]
    const plain = rgbAt(find(renderViews(planes, recipe), 'colour'), 20, 19)
    const redder = rgbAt(find(renderViews(planes, { ...recipe, weights: { i: 2 } }), 'colour'), 20, 19)
    expect(redder[0] / redder[2]).toBeGreaterThan(1.3 * (plain[0] / plain[2]))
  })

  it('does not turn green or magenta when one band is deeper than its neighbours', () => {
    const deeper = (factor: number) => {
      const middle = blob('r', 60)
      // Same light, noise divided: the galaxy is the same object, seen longer.
      const random = new SeededRandom(5)
      const data = middle.data.map((_, i) => {
        const square = ((i % 40) - 20) ** 2 + (Math.floor(i / 40) - 20) ** 2
        return random.normal() * factor + 60 * Math.exp(-square / 8)
      })
      return rgbAt(find(renderViews([blob('g', 60), { ...middle, data }, blob('i', 60)], recipe), 'colour'), 20, 19)
    }
    const plain = deeper(1)
    const long = deeper(0.65)
    expect(long[1] / long[0]).toBeGreaterThan(0.9 * (plain[1] / plain[0]))
    expect(long[1] / long[0]).toBeLessThan(1.1 * (plain[1] / plain[0]))
  })
})

describe('sharing bands out over channels', () => {
  it('maps three bands one to one, longest to red', () => {
    expect(channelWeights(3)).toEqual([
      [0, 0, 1],
      [0, 1, 0],
      [1, 0, 0],
    ])
  })

  it('makes green the mean of two bands', () => {
    expect(channelWeights(2)).toEqual([
      [0, 1],
      [0.5, 0.5],
      [1, 0],
    ])
  })

  it('uses every band of five, each channel weighing 1 in all', () => {
    const weights = channelWeights(5)
    for (const channel of weights) expect(channel.reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 12)
    for (let band = 0; band < 5; band++) expect(weights.some((channel) => channel[band] > 0)).toBe(true)
  })

  it('keeps each band to its own noise when the noises tell of different units', () => {
    expect(colourBalance([1, 1e-13, 1])).toEqual([1, 1, 1])
    const common = colourBalance([1, 1, 1])
    expect(common[0]).toBe(1)
    expect(common[1]).toBeCloseTo(0.95, 12)
  })
})

describe('the deep view', () => {
  it('shows a faint thing in all bands more clearly than any one band does', () => {
    const views = renderViews([blob('g', 4), blob('r', 4), blob('i', 4)], recipe)
    const contrast = (key: string) => {
      const { pixels } = find(views, key)
      const sky = pixels.subarray(0, 400)
      const mean = sky.reduce((sum, value) => sum + value, 0) / 400
      const scatter = Math.sqrt(sky.reduce((sum, value) => sum + (value - mean) ** 2, 0) / 400)
      return (pixels[19 * 40 + 20] - mean) / scatter
    }
    expect(contrast('deep')).toBeGreaterThan(1.3 * contrast('band:g'))
    expect(contrast('deep')).toBeGreaterThan(1.3 * contrast('band:i'))
  })

  it('fills with the other bands where one has no data', () => {
    const gap = withData(blob('r', 50), (data) => data.fill(Number.NaN, 0, 800))
    const view = find(renderViews([blob('g', 50), gap, blob('i', 50)], recipe), 'deep')
    expect(view.note).toBe('Some pixels are made of fewer bands.')
    expect(new Set(view.pixels.subarray(800)).size).toBeGreaterThan(20)
  })
})

describe('what is missing or odd', () => {
  it('is drawn as one neutral grey, and the note says how much', () => {
    const gap = withData(blob('r', 50), (data) => data.fill(Number.NaN, 0, 400))
    const views = renderViews([blob('g', 50), gap, blob('i', 50)], recipe)
    const band = find(views, 'band:r')
    expect(band.note).toBe('No data in 25 % of r, drawn as flat grey.')
    expect(new Set(band.pixels.subarray(1200))).toEqual(new Set([MISSING_GREY]))
    const colour = find(views, 'colour')
    expect(colour.note).toBe('No data in 25 % of r, drawn as flat grey.')
    expect(new Set(colour.pixels.subarray(3600))).toEqual(new Set([MISSING_GREY]))
    expect(find(views, 'band:g').note).toBeNull()
  })

  it('leaves a band that is the same everywhere out of colour and deep', () => {
    const flat = withData(blob('r', 0), (data) => data.fill(12))
    const views = renderViews([blob('g', 50), flat, blob('i', 50)], recipe)
    expect(find(views, 'colour').note).toBe('Colours from g and i only: band r has the same value everywhere.')
    expect(find(views, 'deep').note).toBe('Made of g, i only: band r has the same value everywhere.')
    expect(new Set(find(views, 'band:r').pixels)).toEqual(new Set([MISSING_GREY]))
  })

  it('names a band that the recipe wants and that did not come', () => {
    const views = renderViews([blob('g', 50), blob('i', 50)], recipe)
    expect(views.map((view) => view.key)).toEqual(['colour', 'deep', 'residual', 'blue', 'core', 'band:g', 'band:i'])
    expect(find(views, 'colour').note).toBe('Colours from g and i only: band r is missing.')
    expect(find(views, 'deep').note).toBe('Made of g, i only: band r is missing.')
  })

  it('shows each band in its own size and no colour when no two bands agree', () => {
    const views = renderViews([blob('g', 50), blob('r', 50, 10, 10, 32)], defaultRecipe(['g', 'r']))
    expect(views.map((view) => [view.key, view.width])).toEqual([
      ['deep', 40],
      ['residual', 40],
      ['band:g', 40],
      ['band:r', 32],
    ])
    expect(views[0].note).toContain('No colour view: the bands differ in size (g 40 x 40, r 32 x 32).')
    expect(views[0].note).toContain('Without band r, which differs in size from the other bands.')
  })

  it('makes colour of the bands that agree in size and names the one that does not', () => {
    const views = renderViews([blob('g', 50), blob('r', 50, 10, 10, 32), blob('i', 50)], recipe)
    expect(find(views, 'colour').width).toBe(40)
    expect(find(views, 'colour').note).toBe('Without band r, which differs in size from the other bands.')
  })

  it('without any data is flat grey in every view', () => {
    const empty = BANDS.map((band) => withData(blob(band, 0), (data) => data.fill(Number.NaN)))
    const views = renderViews(empty, recipe)
    expect(views.map((view) => view.key)).toEqual(['deep', 'band:g', 'band:r', 'band:i'])
    for (const view of views) expect(new Set(view.pixels)).toEqual(new Set([MISSING_GREY]))
    expect(views[0].note).toContain('No colour view: band g has no data; band r has no data; band i has no data.')
  })

  it('never makes it throw, and every view has width x height x channels pixels', () => {
    const value = fc.oneof(
      fc.float({ noNaN: false }),
      fc.constantFrom(0, Number.NaN, Number.POSITIVE_INFINITY, -1e38, 1e38, 1e-40),
    )
    const plane = (band: string) =>
      fc
        .tuple(fc.integer({ min: 1, max: 5 }), fc.integer({ min: 1, max: 5 }))
        .chain(([width, height]) =>
          fc
            .array(value, { minLength: width * height, maxLength: width * height })
            .map((data): BandPlane => ({ band, width, height, data: Float32Array.from(data) })),
        )
    fc.assert(
      fc.property(fc.array(fc.constantFrom('g', 'r', 'i', 'z').chain(plane), { maxLength: 4 }), (planes) => {
        for (const view of renderViews(planes, recipe)) {
          expect(view.pixels.length).toBe(view.width * view.height * view.channels)
        }
      }),
    )
  })

  it('refuses a plane whose pixels do not fill its size', () => {
    expect(() => renderViews([{ ...blob('g', 1), width: 39 }], recipe)).toThrow('Band g has 1600 pixels, not 39 x 40.')
  })
})

describe('a recipe that was stored before there were other parts', () => {
  it('still makes its own views, and the same pictures as one that spells those parts out', () => {
    const { version, colour, deep, band } = recipe
    const stored = JSON.parse(
      JSON.stringify({ version, views: ['colour', 'deep', 'band:g', 'band:r', 'band:i'], colour, deep, band }),
    ) as typeof recipe
    const views = renderViews(lens(), stored)
    expect(views.map((view) => view.key)).toEqual(stored.views)
    const spelt = { ...stored, ...extraLimits(stored), northUp: false, weights: { g: 1, r: 1, i: 1 } }
    expect(renderViews(lens(), spelt)).toEqual(views)
  })

  it('makes views that came later too, by their usual limits', () => {
    const { version, colour, deep, band } = recipe
    const stored = { version, views: ['residual', 'blue', 'core'], colour, deep, band }
    const usual = renderViews(lens(), { ...stored, ...extraLimits(recipe) })
    expect(usual).toHaveLength(3)
    expect(renderViews(lens(), stored)).toEqual(usual)
  })
})
