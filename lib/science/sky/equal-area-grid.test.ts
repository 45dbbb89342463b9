import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cellAt, cellBounds, equalAreaGrid, SKY_DEG2 } from './equal-area-grid'

const RADIANS = Math.PI / 180

/** Of a box on the sphere, by integration: (l2 - l1) (sin b2 - sin b1), in square degrees. */
const area = (bounds: ReturnType<typeof cellBounds>) =>
  ((bounds.eastRaDeg - bounds.westRaDeg) *
    (Math.sin(bounds.northDecDeg * RADIANS) - Math.sin(bounds.southDecDeg * RADIANS))) /
  RADIANS

describe('equalAreaGrid', () => {
  // 412 cells for 18 rings: Malkin 2019, table 1, from memory; the area is 41252.96 / 412.
  it('has as many cells as the paper says for rings of 10 degrees', () => {
    const grid = equalAreaGrid(10)
    expect(grid.count).toBe(412)
    expect(grid.areaDeg2).toBeCloseTo(100.1285, 3)
  })

  it.each([90, 30, 7.5, 1, 0.31])('covers the sphere with cells of one area, side %d degrees', (side) => {
    const grid = equalAreaGrid(side)
    expect(SKY_DEG2).toBeCloseTo(41252.96, 2)
    for (const cell of [0, 1, Math.floor(grid.count / 2), grid.count - 1]) {
      expect(area(cellBounds(grid, cell)) / grid.areaDeg2).toBeCloseTo(1, 6)
    }
  })

  it('puts every position into the cell whose bounds hold it', () => {
    const grid = equalAreaGrid(5)
    fc.assert(
      fc.property(
        fc.double({ min: -720, max: 720, noNaN: true }),
        fc.double({ min: -90, max: 90, noNaN: true }),
        (ra, dec) => {
          const cell = cellAt(grid, ra, dec)
          const bounds = cellBounds(grid, cell)
          const turned = ((ra % 360) + 360) % 360
          expect(turned % 360).toBeGreaterThanOrEqual(bounds.westRaDeg - 1e-9)
          expect(turned % 360).toBeLessThanOrEqual(bounds.eastRaDeg + 1e-9)
          expect(dec).toBeGreaterThanOrEqual(bounds.southDecDeg - 1e-6)
          expect(dec).toBeLessThanOrEqual(bounds.northDecDeg + 1e-6)
        },
      ),
      { seed: 20261201 },
    )
  })

  it('has the poles in its first and last ring', () => {
    const grid = equalAreaGrid(5)
    expect(cellAt(grid, 0, -90)).toBe(0)
    expect(cellAt(grid, 359.9999, 90)).toBe(grid.count - 1)
  })
})
