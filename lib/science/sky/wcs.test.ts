import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import type { FitsHeader } from '@/lib/science/fits/fits-types'
import { readFits } from '@/lib/science/fits/read-fits'
import {
  orientation,
  pixelScaleArcsec,
  pixelToSky,
  readWcs,
  skyToPixel,
  WcsError,
  type Wcs,
} from '@/lib/science/sky/wcs'

// Expected values: fixtures/wcs/expected.json and extra.json, by astropy 5.2.1 (wcslib).
interface Pixel {
  x0: number
  y0: number
  icrs_ra_deg: number
  icrs_dec_deg: number
}
interface Expected {
  file: string
  has_celestial: boolean
  pixel_scale_arcsec: [number, number]
  parity_sign_of_det: number
  north_direction_at_centre: { angle_from_plus_y_counterclockwise_deg: number }
  pixels: Pixel[]
}
const { files } = JSON.parse(readFileSync('fixtures/wcs/expected.json', 'utf8')) as { files: Expected[] }
const { rows } = JSON.parse(readFileSync('fixtures/wcs/extra.json', 'utf8')) as {
  rows: { name: string; header: FitsHeader; pixels: Pixel[] }[]
}
const celestial = files.filter(({ has_celestial }) => has_celestial)

async function headerOf(file: string): Promise<FitsHeader> {
  return (await readFits(new Uint8Array(readFileSync(`fixtures/wcs/${file}`)))).images[0].header
}
async function wcsOf(file: string): Promise<Wcs> {
  return readWcs(await headerOf(file))!
}

/** 1e-8 arcsec and 1e-7 pixel: what doubles leave of degrees near 360. */
function expectPixels(wcs: Wcs, pixels: readonly Pixel[]) {
  for (const { x0, y0, icrs_ra_deg, icrs_dec_deg } of pixels) {
    const sky = pixelToSky(wcs, x0, y0)
    expect(Math.abs(sky.decDeg - icrs_dec_deg) * 3600).toBeLessThan(1e-8)
    expect(Math.abs(sky.raDeg - icrs_ra_deg) * 3600 * Math.cos((icrs_dec_deg * Math.PI) / 180)).toBeLessThan(1e-8)
    const pixel = skyToPixel(wcs, icrs_ra_deg, icrs_dec_deg)
    expect(Math.hypot(pixel.x - x0, pixel.y - y0)).toBeLessThan(1e-7)
  }
}

describe('pixels and sky', () => {
  it.each(celestial.map(({ file }) => file))('agree with astropy for %s, there and back', async (file) => {
    expectPixels(await wcsOf(file), files.find((row) => row.file === file)!.pixels)
  })

  it.each(rows.map(({ name }) => name))('agree with astropy for %s, there and back', (name) => {
    const { header, pixels } = rows.find((row) => row.name === name)!
    expectPixels(readWcs(header)!, pixels)
  })

  it('survive being stored as JSON', async () => {
    const wcs = await wcsOf('w7_galactic.fits')
    expect(pixelToSky(JSON.parse(JSON.stringify(wcs)) as Wcs, 3, 4)).toEqual(pixelToSky(wcs, 3, 4))
  })

  it('have no pixel on the far half of the sky, and no sky beyond the edge of SIN', async () => {
    const tan = await wcsOf('w1_cdelt.fits')
    expect(skyToPixel(tan, 330.1, -2.2)).toEqual({ x: NaN, y: NaN })
    expect(pixelToSky(await wcsOf('w6_sin_fk5.fits'), 1e6, 0)).toEqual({ raDeg: NaN, decDeg: NaN })
  })
})

describe('pixelScaleArcsec and orientation', () => {
  it.each(celestial)('agree with astropy for $file', async (expected) => {
    const wcs = await wcsOf(expected.file)
    const [x, y] = pixelScaleArcsec(wcs)
    expect(x).toBeCloseTo(expected.pixel_scale_arcsec[0], 12)
    expect(y).toBeCloseTo(expected.pixel_scale_arcsec[1], 12)
    const { northAngleDeg, eastLeft } = orientation(wcs)
    expect(northAngleDeg).toBeCloseTo(expected.north_direction_at_centre.angle_from_plus_y_counterclockwise_deg, 6)
    expect(eastLeft).toBe(expected.parity_sign_of_det < 0)
  })

  it('takes the reference pixel for the centre when the header gives no size', async () => {
    const header = { ...(await headerOf('w3_pc_ra0.fits')) } as Record<string, string | number | boolean>
    delete header.NAXIS1
    // At the reference pixel the direction is the matrix's own: PC is a turn by 45 degrees.
    expect(orientation(readWcs(header)!).northAngleDeg).toBeCloseTo(45, 6)
  })
})

describe('readWcs', () => {
  const plain: FitsHeader = {
    CTYPE1: 'RA---TAN',
    CTYPE2: 'DEC--TAN',
    CRPIX1: 32.5,
    CRPIX2: 24.5,
    CRVAL1: 150,
    CRVAL2: 2,
    CDELT1: -7e-5,
    CDELT2: 7e-5,
  }
  const without = (keyword: string) => Object.fromEntries(Object.entries(plain).filter(([key]) => key !== keyword))

  it('gives null and invents no scale when there is no celestial WCS', async () => {
    expect(readWcs(await headerOf('w8_none.fits'))).toBeNull()
    expect(readWcs({ CTYPE1: 'WAVE', CTYPE2: 'LINEAR', CDELT1: 1, CDELT2: 1 })).toBeNull()
  })

  // FITS Standard 4.0, 8.3
  it.each([
    [{}, 'ICRS'],
    [{ EQUINOX: 2000 }, 'FK5'],
    [{ RADESYS: 'ICRS', EQUINOX: 2000 }, 'ICRS'],
    [{ RADECSYS: 'FK5' }, 'FK5'],
  ])('takes %j for %s', (cards, frame) => {
    expect(readWcs({ ...plain, ...cards })!.frame).toBe(frame)
  })

  it('lets CD stand over CDELT, with missing CD terms 0', () => {
    const wcs = readWcs({ ...plain, CD1_1: -1e-4, CD2_2: 1e-4 })!
    expect(wcs.matrix).toEqual([
      [-1e-4, 0],
      [0, 1e-4],
    ])
  })

  it.each([
    ['no CRVAL1', without('CRVAL1'), 'no CRVAL1'],
    ['no CRPIX2', without('CRPIX2'), 'no CRPIX2'],
    ['no scale', without('CDELT2'), 'pixel scale is unknown'],
    ['a scale of 0', { ...plain, CDELT1: 0 }, 'singular'],
    ['a value that is no number', { ...plain, CRVAL1: 'NaN' }, "CRVAL1 = 'NaN'"],
    ['a declination beyond the pole', { ...plain, CRVAL2: 91 }, 'CRVAL2 = 91'],
    ['an unknown unit', { ...plain, CUNIT1: 'furlong' }, "CUNIT1 = 'furlong'"],
    ['another projection', { ...plain, CTYPE1: 'RA---AIT', CTYPE2: 'DEC--AIT' }, 'projection AIT'],
    ['two projections', { ...plain, CTYPE2: 'DEC--SIN' }, 'do not belong together'],
    ['one celestial axis', { ...plain, CTYPE2: 'FREQ' }, 'only one of the two'],
    ['two longitudes', { ...plain, CTYPE2: 'RA---TAN' }, 'do not belong together'],
    [
      'celestial axes behind others',
      { CTYPE1: 'FREQ', CTYPE2: 'STOKES', CTYPE3: 'RA---TAN', CTYPE4: 'DEC--TAN' },
      'axis 3',
    ],
    ['B1950 coordinates', { ...plain, EQUINOX: 1950 }, 'FK4'],
    ['FK5 of another equinox', { ...plain, RADESYS: 'FK5', EQUINOX: 1984.5 }, 'EQUINOX = 1984.5'],
    ['ecliptic coordinates', { ...plain, CTYPE1: 'ELON-TAN', CTYPE2: 'ELAT-TAN' }, 'ELON-TAN'],
    ['a slanted SIN', { ...plain, CTYPE1: 'RA---SIN', CTYPE2: 'DEC--SIN', PV2_1: 0.1 }, 'PV2_1 = 0.1'],
    ['SIP without its order', { ...plain, CTYPE1: 'RA---TAN-SIP', CTYPE2: 'DEC--TAN-SIP' }, 'no A_ORDER'],
  ])('refuses %s in a sentence', (_, header, words) => {
    expect(() => readWcs(header as FitsHeader)).toThrow(WcsError)
    expect(() => readWcs(header as FitsHeader)).toThrow(words)
  })
})
