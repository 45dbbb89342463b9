import { expect, it } from 'vitest'
import { readFits } from '@/lib/science/fits/read-fits'
import { writeFits } from '@/lib/science/fits/write-fits'
import { readWcs, type Wcs } from './wcs'
import { wcsCards } from './wcs-cards'

const WCS: Wcs = {
  projection: 'TAN',
  frame: 'ICRS',
  referencePixel: [2.5, 1.25],
  referencePoint: [150.0123456789, -2.25],
  matrix: [
    [-5.5e-5, 1.25e-6],
    [1.25e-6, 5.5e-5],
  ],
  poleLongitudeDeg: 180,
  sip: null,
  size: [3, 2],
}

it.each<[string, Wcs]>([
  ['a plain one', WCS],
  ['one of FK5 and SIN', { ...WCS, frame: 'FK5', projection: 'SIN' }],
  ['a galactic one with its pole elsewhere', { ...WCS, frame: 'GALACTIC', poleLongitudeDeg: 170 }],
  ['one with distortion', { ...WCS, sip: { x: [[2, 0, 1e-5]], y: [[1, 2, -3e-7]] } }],
])('a WCS is read back from its cards as it was: %s', async (_, wcs) => {
  const bytes = writeFits([{ header: wcsCards(wcs), width: 3, height: 2, data: new Float32Array(6) }])
  const { images } = await readFits(bytes)
  expect(readWcs(images[0].header)).toEqual(wcs)
})
