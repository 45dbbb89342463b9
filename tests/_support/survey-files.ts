import { demoFiles } from '@/fixtures/demo/demo-candidates'
import { simulateCandidate, SIMULATED_KINDS } from '@/lib/science/lensing/simulate-candidate'
import { cutoutFits } from './cutouts'

/** A file of a search, made when it is asked for, so that tens of thousands need no memory. */
export interface SurveyFile {
  name: string
  bytes(): Uint8Array
}

const BANDS = ['g', 'r', 'i']

export const candidateName = (index: number): string => `SWS${String(index + 1).padStart(5, '0')}`

/** 24 by 24 pixels, quick to read and draw. */
export function smallSearch(candidates: number): SurveyFile[] {
  return Array.from({ length: candidates }, (_, index) =>
    BANDS.map((band, order) => ({
      name: `north/${candidateName(index)}_${band}.fits`,
      bytes: () => cutoutFits({ seed: 10 * index + order, position: { raDeg: 150 + index / 1000, decDeg: 2.2 } }),
    })),
  ).flat()
}

const DISTINCT = 24

/**
 * 80 by 80 pixels from the simulator, a few distinct ones over and over with one pixel in a corner changed, so that no two files
 * have the same bytes.
 */
export function fullSearch(candidates: number): SurveyFile[] {
  const distinct = Array.from({ length: DISTINCT }, (_, index) => {
    const simulated = simulateCandidate(SIMULATED_KINDS[index % SIMULATED_KINDS.length], 4000 + index)
    return demoFiles({ name: 'SWS', raDeg: 10 + index / 100, decDeg: 1, score: 0.9, simulated })
  })
  return Array.from({ length: candidates }, (_, index) =>
    distinct[index % DISTINCT].map((file) => ({
      name: `north/${candidateName(index)}${file.name.slice(file.name.lastIndexOf('_'))}`,
      bytes: () => withCornerPixel(file.bytes, index),
    })),
  ).flat()
}

/** FITS data begin at the next block of 2880 bytes after END (FITS 4.0, section 3.3) and are big-endian floats here. */
function withCornerPixel(bytes: Uint8Array, index: number): Uint8Array {
  const copy = bytes.slice()
  const end = Buffer.from(copy.buffer).indexOf('END' + ' '.repeat(77))
  const data = Math.ceil((end + 80) / 2880) * 2880
  new DataView(copy.buffer).setFloat32(data, index * 1e-4)
  return copy
}
