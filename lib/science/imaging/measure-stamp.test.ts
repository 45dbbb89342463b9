import { describe, expect, it } from 'vitest'
import { measureStep, placeOnSky } from './measure-stamp'

const STEP = { right: 12, down: 7 }
const geometry = (northAngleDeg: number | null, eastLeft = true, pixelScaleArcsec: number | null = 0.2) => ({
  pixelScaleArcsec,
  northAngleDeg,
  eastLeft,
})

// astropy 5 to 7: WCS with CTYPE TAN, CRPIX in the middle, CD of 0.2 arcsec turned as named; wcs_pix2world of the place 12 pixels
// right and 7 down, then SkyCoord.separation and position_angle from the middle.
const ASTROPY = [
  {
    from: { raDeg: 150.1, decDeg: -2.2 },
    north: 0,
    eastLeft: true,
    to: [150.0993328414079, -2.2003888887398624],
    pa: 239.743562836,
  },
  {
    from: { raDeg: 150.1, decDeg: -2.2 },
    north: 30,
    eastLeft: true,
    to: [150.0996168115613, -2.200670120941168],
    pa: 209.743562836,
  },
  {
    from: { raDeg: 10, decDeg: 80 },
    north: -120,
    eastLeft: false,
    to: [10.000019894177127, 80.00077179471299],
    pa: 0.256437164,
  },
  {
    from: { raDeg: 0.0001, decDeg: 60 },
    north: 45,
    eastLeft: true,
    to: [359.99970717176285, 59.999253608925684],
    pa: 194.743562838,
  },
] as const

describe('a step on a picture', () => {
  it.each(ASTROPY)('has the length, direction and end that astropy finds, %j', ({ from, north, eastLeft, to, pa }) => {
    const measured = measureStep(STEP, geometry(north, eastLeft))
    expect(measured.lengthArcsec).toBeCloseTo(2.77848879772, 6)
    expect(measured.positionAngleDeg).toBeCloseTo(pa, 6)
    const place = placeOnSky(from, STEP, geometry(north, eastLeft))
    expect(place?.raDeg).toBeCloseTo(to[0], 9)
    expect(place?.decDeg).toBeCloseTo(to[1], 9)
  })

  it('to the left is east and up is north on the sky as seen, and the other way in a mirrored picture', () => {
    expect(measureStep({ right: -5, down: 0 }, geometry(0)).positionAngleDeg).toBeCloseTo(90)
    expect(measureStep({ right: 0, down: -5 }, geometry(0)).positionAngleDeg).toBeCloseTo(0)
    expect(measureStep({ right: -5, down: 0 }, geometry(0, false)).positionAngleDeg).toBeCloseTo(270)
  })

  it('without a scale has no length, without a compass no direction, and no place on the sky without both', () => {
    expect(measureStep(STEP, geometry(0, true, null))).toEqual({
      lengthArcsec: null,
      positionAngleDeg: expect.closeTo(239.743562836, 6) as number,
    })
    expect(measureStep(STEP, geometry(null)).positionAngleDeg).toBeNull()
    const from = { raDeg: 150, decDeg: 2 }
    expect(placeOnSky(from, STEP, geometry(null))).toBeNull()
    expect(placeOnSky(from, STEP, geometry(0, true, null))).toBeNull()
  })

  it('of no length has no direction and ends where it began', () => {
    const none = { right: 0, down: 0 }
    expect(measureStep(none, geometry(0))).toEqual({ lengthArcsec: 0, positionAngleDeg: null })
    expect(placeOnSky({ raDeg: 150, decDeg: 2 }, none, geometry(0))).toEqual({ raDeg: 150, decDeg: 2 })
  })
})
