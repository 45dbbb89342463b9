import { describe, expect, it } from 'vitest'
import { dragGrip, handlesOf, nudgeGrip, type Grip, type LensAndSource } from './move-lens'

const MODEL: LensAndSource = {
  lens: {
    centre: { east: 1, north: -1 },
    einsteinRadiusArcsec: 2,
    axisRatio: 0.64,
    positionAngleDeg: 90,
    shear: { strength: 0.1, positionAngleDeg: 0 },
  },
  source: { east: 1.2, north: -1 },
}
const shifted = ({ east, north }: { east: number; north: number }, by: { east: number; north: number }) => ({
  east: east + by.east,
  north: north + by.north,
})

describe('dragging', () => {
  it('has its handles at the ends of both axes: b / sqrt f and b sqrt f', () => {
    const { shape, size } = handlesOf(MODEL)
    expect(shape).toEqual({ east: expect.closeTo(1 + 2.5, 9), north: expect.closeTo(-1, 9) })
    expect(size).toEqual({ east: expect.closeTo(1, 9), north: expect.closeTo(-1 - 1.6, 9) })
  })

  it.each(['lens', 'size', 'shape', 'shear', 'source'] satisfies Grip[])(
    'moves the handle %s by as much as the pointer moves that took hold of it',
    (grip) => {
      const from = handlesOf(MODEL)[grip]
      // Away from the lens along its own line for the size, anywhere for the others.
      const by = grip === 'size' ? { east: 0, north: -0.3 } : { east: 0.2, north: 0.1 }
      const moved = dragGrip(MODEL, grip, from, shifted(from, by))
      // The size keeps the axis ratio: its handle goes by sqrt f of what the radius grows.
      const expected = grip === 'size' ? { east: 0, north: -0.3 * 0.8 } : by
      const after = handlesOf(moved)[grip]
      expect(after.east).toBeCloseTo(from.east + expected.east, 9)
      expect(after.north).toBeCloseTo(from.north + expected.north, 9)
    },
  )

  it('takes the source along with the lens, and leaves the lens where the source is moved', () => {
    const by = { east: 0.5, north: 0.25 }
    const lens = dragGrip(MODEL, 'lens', MODEL.lens.centre, shifted(MODEL.lens.centre, by))
    expect(lens.source).toEqual(shifted(MODEL.source, by))
    const source = dragGrip(MODEL, 'source', { east: 9, north: 9 }, shifted({ east: 9, north: 9 }, by))
    expect(source).toEqual({ lens: MODEL.lens, source: shifted(MODEL.source, by) })
  })

  it('holds the end on the pointer’s side: pulling the other end outward makes it longer too', () => {
    const other = { east: 1 - 2.5, north: -1 }
    const { lens } = dragGrip(MODEL, 'shape', other, { east: other.east - 0.5, north: other.north })
    expect(lens.positionAngleDeg).toBeCloseTo(90, 9)
    expect(lens.axisRatio).toBeCloseTo((2 / 3) ** 2, 9)
  })

  it('never leaves what a lens can be: a thin ellipse, no shear below 0, a radius above 0', () => {
    const far = { east: 1 + 50, north: -1 }
    expect(dragGrip(MODEL, 'shape', { east: 3.5, north: -1 }, far).lens.axisRatio).toBe(0.2)
    expect(dragGrip(MODEL, 'shear', { east: 1, north: 2.2 }, { east: 1, north: 0 }).lens.shear.strength).toBe(0)
    expect(dragGrip(MODEL, 'size', { east: 3, north: -1 }, MODEL.lens.centre).lens.einsteinRadiusArcsec).toBe(0.02)
  })
})

describe('arrow keys', () => {
  const step = { move: () => ({ east: -0.05, north: 0 }), stepArcsec: 0.05, times: 1 }

  it('move, enlarge, flatten and turn', () => {
    expect(nudgeGrip(MODEL, 'source', { right: 1, up: 0 }, step).source.east).toBeCloseTo(1.15, 9)
    expect(nudgeGrip(MODEL, 'size', { right: 0, up: 1 }, step).lens.einsteinRadiusArcsec).toBeCloseTo(2.05, 9)
    expect(nudgeGrip(MODEL, 'shape', { right: 0, up: 1 }, step).lens.axisRatio).toBeCloseTo(0.63, 9)
    expect(nudgeGrip(MODEL, 'shape', { right: 1, up: 0 }, { ...step, times: 10 }).lens.positionAngleDeg).toBe(100)
    expect(nudgeGrip(MODEL, 'shear', { right: -1, up: 0 }, step).lens.shear.positionAngleDeg).toBe(179)
  })
})
