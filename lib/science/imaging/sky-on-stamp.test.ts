import { describe, expect, it } from 'vitest'
import { measureStep } from './measure-stamp'
import { offsetOfStep, stepOfOffset } from './sky-on-stamp'

const UP = { pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true }

describe('offsets on the sky and steps on a picture', () => {
  it('with north up and east on the left: an arcsec east is five pixels of 0.2 to the left, one north five up', () => {
    expect(stepOfOffset({ east: 1, north: 0 }, UP)).toEqual({ right: -5, down: expect.closeTo(0, 12) })
    expect(stepOfOffset({ east: 0, north: 1 }, UP)).toEqual({ right: expect.closeTo(0, 12), down: -5 })
  })

  it('of a mirrored picture have east on the right', () => {
    expect(stepOfOffset({ east: 1, north: 0 }, { ...UP, eastLeft: false }).right).toBeCloseTo(5, 12)
  })

  const turned = [0, 37, 90, 180, 251].flatMap((northAngleDeg) =>
    [true, false].map((eastLeft) => ({ pixelScaleArcsec: 0.263, northAngleDeg, eastLeft })),
  )
  it.each(turned)('agree with the ruler of the bench and come back: %o', (geometry) => {
    const offset = { east: 1.3, north: -0.7 }
    const step = stepOfOffset(offset, geometry)
    const { lengthArcsec, positionAngleDeg } = measureStep(step, geometry)
    expect(lengthArcsec).toBeCloseTo(Math.hypot(1.3, 0.7), 12)
    // Position angle from north through east: atan2(east, north).
    expect(positionAngleDeg).toBeCloseTo((Math.atan2(1.3, -0.7) * 180) / Math.PI, 9)
    const back = offsetOfStep(step, geometry)
    expect(back.east).toBeCloseTo(1.3, 12)
    expect(back.north).toBeCloseTo(-0.7, 12)
  })

  it('of an unknown scale are not numbers, and an unknown direction is taken for north up', () => {
    expect(stepOfOffset({ east: 1, north: 0 }, { ...UP, pixelScaleArcsec: null }).right).toBeNaN()
    const unknown = { pixelScaleArcsec: 0.2, northAngleDeg: null, eastLeft: false }
    expect(stepOfOffset({ east: 1, north: 0 }, unknown).right).toBeCloseTo(-5, 12)
  })
})
