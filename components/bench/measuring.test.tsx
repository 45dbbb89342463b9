import { describe, expect, it } from 'vitest'
import { beginMeasuring, moveHeld, nearest, readingOf, withRadius, type Measured } from './measuring'

const geometry = { pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true }
const picture: Measured = { side: 80, geometry, raDeg: 150.1, decDeg: -2.2 }
const right = (pixels: number) => ({ x: pixels / 80, y: 0 })
const up = (pixels: number) => ({ x: 0, y: -pixels / 80 })

describe('the ruler', () => {
  it('begins at the middle, inside what is in sight, and tells length and direction from there', () => {
    expect(readingOf(beginMeasuring(1), 'ruler', picture)).toBe('2.88″, 90° east of north')
    expect(readingOf(beginMeasuring(2), 'ruler', picture)).toBe('1.44″, 90° east of north')
  })

  it('grows by pixels of the picture at the end that is held', () => {
    const begun = { ...beginMeasuring(1), held: 1 as const }
    const still = { x: -begun.places[1].x + 0.5, y: 0 }
    const north = moveHeld(moveHeld(begun, 'ruler', still), 'ruler', up(10))
    expect(readingOf(north, 'ruler', picture)).toBe('2.00″, 0° east of north')
    const both = moveHeld({ ...north, held: 0 }, 'ruler', up(10))
    expect(readingOf(both, 'ruler', picture)).toBe('0.00″')
  })

  it('stays on the picture', () => {
    const far = moveHeld(beginMeasuring(1), 'ruler', right(500))
    expect(far.places[1]).toEqual({ x: 1, y: 0.5 })
  })

  it('says in pixels what it cannot say in arcseconds, and that north is unknown', () => {
    const blind = { ...picture, geometry: { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true } }
    expect(readingOf(beginMeasuring(1), 'ruler', blind)).toBe(
      '14.4 px (pixel scale unknown), direction of north unknown',
    )
  })
})

describe('the circle', () => {
  it('tells its radius and the position of its centre', () => {
    const begun = withRadius(beginMeasuring(1), 10 / 80)
    expect(readingOf(begun, 'circle', picture)).toBe('Radius 2.00″, centre 10ʰ00ᵐ24.00ˢ −02°12′00.0″')
    const moved = moveHeld(moveHeld({ ...begun, held: 0 }, 'circle', right(12)), 'circle', up(-7))
    // 12 pixels right and 7 down by astropy: 150.09933284, -2.20038889.
    expect(readingOf(moved, 'circle', picture)).toBe('Radius 2.00″, centre 10ʰ00ᵐ23.84ˢ −02°12′01.4″')
  })

  it('changes its radius at the edge: right and up widen, left and down narrow, never below nothing', () => {
    const begun = withRadius(beginMeasuring(1), 10 / 80)
    const radius = (measuring: typeof begun) => measuring.places[1].x - measuring.places[0].x
    expect(radius(moveHeld(begun, 'circle', right(1)))).toBeCloseTo(11 / 80)
    expect(radius(moveHeld(begun, 'circle', up(1)))).toBeCloseTo(11 / 80)
    expect(radius(moveHeld(begun, 'circle', right(-1)))).toBeCloseTo(9 / 80)
    expect(radius(moveHeld(begun, 'circle', right(-99)))).toBe(0)
  })

  it('says that a position is unknown without one', () => {
    expect(readingOf(beginMeasuring(1), 'circle', { ...picture, raDeg: null })).toMatch(/centre position unknown$/)
  })
})

describe('a pointer', () => {
  it('takes the nearer end, and of a circle its edge or its centre', () => {
    const begun = beginMeasuring(1)
    expect(nearest(begun, 'ruler', { x: 0.45, y: 0.5 })).toBe(0)
    expect(nearest(begun, 'ruler', { x: 0.9, y: 0.9 })).toBe(1)
    expect(nearest(begun, 'circle', { x: 0.52, y: 0.5 })).toBe(0)
    expect(nearest(begun, 'circle', { x: 0.5, y: 0.33 })).toBe(1)
  })
})
