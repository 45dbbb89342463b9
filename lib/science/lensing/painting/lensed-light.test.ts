import { describe, expect, it } from 'vitest'
import { readReference } from '../_reference'
import { PAINTING, total } from './_painting-scene'
import { lensedLight } from './lensed-light'
import type { Painting } from './painting-ranges'
import { pixelOf, plainGrid, type SkyGrid } from './sky-grid'

const SIZE = { width: 81, height: 81 }
const GRID = plainGrid(40, 40, 0.2)
const UNLENSED: Painting = {
  ...PAINTING,
  einsteinRadiusArcsec: 0,
  source: { ...PAINTING.source, east: 0.4, north: -0.3 },
}

describe('light without a lens', () => {
  // A Sersic profile of index 1 keeps all but 1e-6 of its light within 9 half-light radii (Graham & Driver 2005, equation 2).
  it('keeps its total, blurred or not', () => {
    expect(total(lensedLight(UNLENSED, GRID, SIZE, 0))).toBeCloseTo(1, 2)
    expect(total(lensedLight(UNLENSED, GRID, SIZE, 0.8))).toBeCloseTo(1, 2)
  })

  it('lies where its source is, on grids that are turned and mirrored too', () => {
    const turned: SkyGrid = { x: 38.3, y: 41.2, a: 0.16, b: 0.12, c: -0.12, d: 0.16 }
    for (const grid of [GRID, turned, { ...turned, a: -0.16, c: 0.12 }]) {
      const light = lensedLight(UNLENSED, grid, SIZE, 0.8)
      const expected = pixelOf(grid, 0.4, -0.3)
      const { x, y } = centroid(light, 0, 0, SIZE.width, SIZE.height)
      expect(Math.hypot(x - expected.x, y - expected.y)).toBeLessThan(0.03)
    }
  })

  it('is as wide as the seeing, on square pixels and on pixels that are not', () => {
    const point = { ...UNLENSED, source: { ...UNLENSED.source, east: 0, north: 0, effectiveRadiusArcsec: 0.03 } }
    for (const [seeing, grid] of [
      [0.8, GRID],
      [1.2, GRID],
      [1.2, { ...GRID, a: -0.25, d: 0.15 }],
    ] as const) {
      const light = lensedLight(point, grid, SIZE, seeing)
      const middle = 40 * SIZE.width + 40
      // Half of the peak lies at half the width: read off along x and along y between pixels.
      expect(2 * halfRadius((k) => light[middle + k]) * Math.abs(grid.a)).toBeCloseTo(seeing, 1)
      expect(2 * halfRadius((k) => light[middle + k * SIZE.width]) * grid.d).toBeCloseTo(seeing, 1)
    }
  })
})

interface LensCase {
  b_arcsec: number
  axis_ratio_f: number
  pa_deg: number
  sources: {
    case: string
    source_east: number
    source_north: number
    images: { east_arcsec: number; north_arcsec: number; magnification_signed: number }[]
  }[]
}

// fixtures/lensing/lensing.json: positions and magnifications of point images (Kormann, Schneider & Bartelmann 1994, in numpy).
// A source of a finite size is magnified as its middle is only away from caustics: images of less than 12 times each, 5 %.
const { lenses } = readReference<{ sie: { lenses: LensCase[] } }>('lensing').sie
const CASES = lenses.flatMap((lens) =>
  lens.sources
    .filter(({ images }) => images.every(({ magnification_signed }) => Math.abs(magnification_signed) < 12))
    .map((source) => ({ lens, source, name: `${source.case} of ${lens.b_arcsec} arcsec` })),
)

describe.each(CASES)('a small source behind an ellipsoid, $name', ({ lens, source }) => {
  const painting: Painting = {
    ...PAINTING,
    einsteinRadiusArcsec: lens.b_arcsec,
    axisRatio: lens.axis_ratio_f,
    positionAngleDeg: lens.pa_deg,
    source: { ...PAINTING.source, east: source.source_east, north: source.source_north, effectiveRadiusArcsec: 0.01 },
  }
  const grid = plainGrid(100, 100, 0.05)
  const size = { width: 201, height: 201 }
  const light = lensedLight(painting, grid, size, 0)

  it("is magnified as the reference's images together", () => {
    const expected = source.images.reduce((sum, { magnification_signed }) => sum + Math.abs(magnification_signed), 0)
    expect(total(light) / expected).toBeGreaterThan(0.95)
    expect(total(light) / expected).toBeLessThan(1.05)
  })

  it('shows its images where the reference has them', () => {
    for (const { east_arcsec, north_arcsec, magnification_signed } of source.images) {
      if (Math.abs(magnification_signed) < 0.2) continue
      const at = pixelOf(grid, east_arcsec, north_arcsec)
      const found = centroid(light, Math.round(at.x) - 5, Math.round(at.y) - 5, 11, 11)
      expect(Math.hypot(found.x - at.x, found.y - at.y) * 0.05).toBeLessThan(0.03)
    }
  })
})

it('has reference cases to be held to', () => {
  expect(CASES.length).toBeGreaterThanOrEqual(5)
})

function centroid(light: Float64Array, left: number, bottom: number, width: number, height: number) {
  let [sum, sumX, sumY] = [0, 0, 0]
  for (let y = Math.max(0, bottom); y < bottom + height; y++) {
    for (let x = Math.max(0, left); x < left + width; x++) {
      const value = light[y * Math.round(Math.sqrt(light.length)) + x] ?? 0
      sum += value
      sumX += value * x
      sumY += value * y
    }
  }
  return { x: sumX / sum, y: sumY / sum }
}

function halfRadius(at: (k: number) => number): number {
  const half = at(0) / 2
  let k = 0
  while (at(k + 1) > half) k++
  return k + (at(k) - half) / (at(k) - at(k + 1))
}
