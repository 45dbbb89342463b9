import { expect, it } from 'vitest'
import { turnPixels } from '@/lib/science/lensing/painting/turn-pixels'
import { turnGeometry } from './turn-geometry'

const SIDE = 101
const MIDDLE = 50
const REACH = 40

/** Pixel that lies in a direction from the middle, degrees counter-clockwise from up; row 0 is the bottom row. */
function pixelTowards(angleDeg: number): number {
  const angle = (angleDeg * Math.PI) / 180
  return Math.round(MIDDLE + REACH * Math.cos(angle)) * SIDE + Math.round(MIDDLE - REACH * Math.sin(angle))
}

// Held against the pixels: a mark to the north and one to the east are turned with the picture and must lie where the compass says.
it.each(Array.from({ length: 8 }, (_, turned) => turned))('the compass turns with the pixels, turn %i', (turned) => {
  for (const northAngleDeg of [0, 35, -120]) {
    for (const eastLeft of [true, false]) {
      const data = new Float32Array(SIDE * SIDE)
      data[pixelTowards(northAngleDeg)] = 1
      data[pixelTowards(northAngleDeg + (eastLeft ? 90 : -90))] = 2
      const picture = turnPixels({ width: SIDE, height: SIDE, data }, turned)
      const shown = turnGeometry({ pixelScaleArcsec: 0.2, northAngleDeg, eastLeft }, turned)
      const north = shown.northAngleDeg ?? Number.NaN
      expect(picture.data[pixelTowards(north)]).toBe(1)
      expect(picture.data[pixelTowards(north + (shown.eastLeft ? 90 : -90))]).toBe(2)
      expect(north).toBeGreaterThanOrEqual(-180)
      expect(north).toBeLessThan(180)
    }
  }
})

it('a picture whose north is not known stays so', () => {
  const geometry = { pixelScaleArcsec: 0.2, northAngleDeg: null, eastLeft: true }
  expect(turnGeometry(geometry, 5)).toEqual({ ...geometry, eastLeft: false })
})
