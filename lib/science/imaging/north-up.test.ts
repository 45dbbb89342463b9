import { describe, expect, it } from 'vitest'
import { northUp } from './north-up'
import type { BandPlane } from './normalise-planes'

/** A plane whose only light is a Gaussian of 2 pixels at an offset from the middle. */
function source(dx: number, dy: number, width = 41, height = 41): BandPlane {
  const data = Float32Array.from({ length: width * height }, (_, i) => {
    const x = (i % width) - (width - 1) / 2 - dx
    const y = Math.floor(i / width) - (height - 1) / 2 - dy
    return 100 * Math.exp(-(x * x + y * y) / 8)
  })
  return { band: 'g', width, height, data }
}

/** Offset of the light's centre from the middle, and its sum. */
function light({ data, width, height }: BandPlane) {
  let sum = 0
  let x = 0
  let y = 0
  data.forEach((value, i) => {
    if (value !== value) return
    sum += value
    x += value * ((i % width) - (width - 1) / 2)
    y += value * (Math.floor(i / width) - (height - 1) / 2)
  })
  return { sum, x: x / sum, y: y / sum }
}

describe('north up, east left', () => {
  // Geometry: what lies 8 pixels north must end 8 pixels above the middle, what lies east 8 pixels left of it.
  it.each([0, 30, 90, 137.5, 180, 270, -60])(
    'puts north above and east left when north stood at %s degrees',
    (angle) => {
      const a = (angle * Math.PI) / 180
      const toNorth = northUp(source(-8 * Math.sin(a), 8 * Math.cos(a)), { northAngleDeg: angle, eastLeft: true })
      expect(light(toNorth).x).toBeCloseTo(0, 1)
      expect(light(toNorth).y).toBeCloseTo(8, 1)
      const toEast = northUp(source(-8 * Math.cos(a), -8 * Math.sin(a)), { northAngleDeg: angle, eastLeft: true })
      expect(light(toEast).x).toBeCloseTo(-8, 1)
      expect(light(toEast).y).toBeCloseTo(0, 1)
    },
  )

  it('mirrors a picture in which east stood on the other side', () => {
    const a = (25 * Math.PI) / 180
    const geometry = { northAngleDeg: 25, eastLeft: false }
    const toEast = northUp(source(8 * Math.cos(a), 8 * Math.sin(a)), geometry)
    expect(light(toEast).x).toBeCloseTo(-8, 1)
    expect(light(northUp(source(-8 * Math.sin(a), 8 * Math.cos(a)), geometry)).y).toBeCloseTo(8, 1)
  })

  it('keeps the flux within 1 %', () => {
    const plane = source(5, -3)
    const turned = northUp(plane, { northAngleDeg: 33, eastLeft: true })
    expect(Math.abs(light(turned).sum / light(plane).sum - 1)).toBeLessThan(0.01)
  })

  it('moves pixels exactly in quarter turns, of oblong pictures too, and brings them back', () => {
    const plane = source(3, 9, 21, 40)
    const turned = northUp(plane, { northAngleDeg: 90, eastLeft: true })
    expect([turned.width, turned.height]).toEqual([40, 21])
    expect(northUp(turned, { northAngleDeg: -90, eastLeft: true }).data).toEqual(plane.data)
    expect([...turned.data].sort()).toEqual([...plane.data].sort())
  })

  it('has no data in corners that were not in the cutout, and keeps gaps', () => {
    const plane = source(0, 0)
    plane.data[20 * 41 + 30] = Number.NaN
    const turned = northUp(plane, { northAngleDeg: 45, eastLeft: true })
    expect(turned.data[0]).toBeNaN()
    expect(turned.data[20 * 41 + 20]).toBeCloseTo(100, 3)
    expect(northUp(plane, { northAngleDeg: 180, eastLeft: true }).data[20 * 41 + 10]).toBeNaN()
  })

  it('leaves the picture alone when the direction of north is not known', () => {
    const plane = source(1, 2)
    expect(northUp(plane, { northAngleDeg: null, eastLeft: true })).toBe(plane)
  })
})
