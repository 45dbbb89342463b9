import { expect, it } from 'vitest'
import { fieldArcsec, lineOf, offsetOf, spotOf, type Frame } from './frame'

const WHOLE: Frame = {
  side: 80,
  geometry: { pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true },
  closer: 1,
  zoom: { scale: 1, x: 0, y: 0 },
  wide: false,
}

it('the middle of the picture is the candidate, and an arcsec east lies a sixteenth of the box to the left', () => {
  expect(spotOf({ east: 0, north: 0 }, WHOLE)).toEqual({ x: 50, y: 50 })
  expect(spotOf({ east: 1, north: 0 }, WHOLE).x).toBeCloseTo(50 - 100 / 16, 9)
})

const FRAMES: Frame[] = [
  WHOLE,
  { ...WHOLE, closer: 16 / 12 },
  { ...WHOLE, wide: true },
  { ...WHOLE, wide: true, zoom: { scale: 2.5, x: 0.1, y: -0.2 } },
  {
    ...WHOLE,
    closer: 2,
    zoom: { scale: 4, x: 0.3, y: 0.1 },
    geometry: { pixelScaleArcsec: 0.05, northAngleDeg: 70, eastLeft: false },
  },
]
it.each(FRAMES)('a place goes to the box and comes back: frame %#', (frame) => {
  const back = offsetOf(spotOf({ east: 1.234, north: -0.56 }, frame), frame)
  expect(back.east).toBeCloseTo(1.234, 12)
  expect(back.north).toBeCloseTo(-0.56, 12)
})

it('the field of view is what the box spans: whole, close, zoomed and with room around', () => {
  expect(fieldArcsec(WHOLE)).toBeCloseTo(16, 12)
  expect(fieldArcsec({ ...WHOLE, closer: 16 / 12 })).toBeCloseTo(12, 12)
  expect(fieldArcsec({ ...WHOLE, zoom: { scale: 2, x: 0, y: 0 } })).toBeCloseTo(8, 12)
  expect(fieldArcsec({ ...WHOLE, wide: true })).toBeCloseTo(32, 12)
})

it('a closed line ends where it began', () => {
  expect(
    lineOf(
      [
        { east: 0, north: 0 },
        { east: 1.6, north: 0 },
      ],
      WHOLE,
    ),
  ).toBe('M50 50L40 50Z')
  expect(lineOf([], WHOLE)).toBe('')
})
