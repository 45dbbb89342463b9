import type { FitsCard } from '@/lib/science/fits/write-card'
import { writeFits, type ImageToWrite } from '@/lib/science/fits/write-fits'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

/** Small FITS cutouts for tests of intake: a round source on Gaussian noise, with a TAN WCS of 0.2 arcsec pixels. */
export const SIDE = 24

export interface CutoutOptions {
  seed: number
  /** Degrees; null writes no WCS. */
  position?: { raDeg: number; decDeg: number } | null
  header?: FitsCard[]
  extname?: string
}

export function wcsCards(raDeg: number, decDeg: number): FitsCard[] {
  const scale = 0.2 / 3600
  return [
    { keyword: 'CTYPE1', value: 'RA---TAN' },
    { keyword: 'CTYPE2', value: 'DEC--TAN' },
    { keyword: 'CRVAL1', value: raDeg },
    { keyword: 'CRVAL2', value: decDeg },
    { keyword: 'CRPIX1', value: (SIDE + 1) / 2 },
    { keyword: 'CRPIX2', value: (SIDE + 1) / 2 },
    { keyword: 'CD1_1', value: -scale },
    { keyword: 'CD1_2', value: 0 },
    { keyword: 'CD2_1', value: 0 },
    { keyword: 'CD2_2', value: scale },
  ]
}

export function cutoutImage({
  seed,
  position = { raDeg: 150.1, decDeg: 2.2 },
  header = [],
  extname,
}: CutoutOptions): ImageToWrite {
  const random = new SeededRandom(seed)
  const middle = (SIDE - 1) / 2
  const data = Float32Array.from({ length: SIDE * SIDE }, (_, index) => {
    const radius2 = ((index % SIDE) - middle) ** 2 + (Math.floor(index / SIDE) - middle) ** 2
    return random.normal() + 60 * Math.exp(-radius2 / 8)
  })
  const cards = [...(position ? wcsCards(position.raDeg, position.decDeg) : []), ...header]
  return { width: SIDE, height: SIDE, data, header: cards, extname }
}

export const cutoutFits = (options: CutoutOptions): Uint8Array => writeFits([cutoutImage(options)])
