/**
 * Reads the simplest FITS images (one header unit, big-endian, no scaling) of fixtures/stretch. Small on purpose, so
 * that the tests of this room stand on nothing but themselves.
 */
import { readFileSync } from 'node:fs'
import path from 'node:path'

const FOLDER = path.join(process.cwd(), 'fixtures', 'stretch')

export interface FixtureImage {
  width: number
  height: number
  /** One array a plane; row 0 is the bottom row. */
  planes: Float64Array[]
}

export function readFixture(name: string): FixtureImage {
  const bytes = readFileSync(path.join(FOLDER, name))
  const cards = new Map<string, number>()
  let position = 0
  for (; ; position += 80) {
    const card = bytes.toString('latin1', position, position + 80)
    if (card.startsWith('END')) break
    if (card[8] === '=') cards.set(card.slice(0, 8).trim(), Number.parseFloat(card.slice(10).split('/')[0]))
  }
  const start = Math.ceil((position + 80) / 2880) * 2880
  const width = cards.get('NAXIS1') ?? 1
  const height = cards.get('NAXIS2') ?? 1
  const depth = cards.get('NAXIS3') ?? 1
  const bits = cards.get('BITPIX') ?? 8
  const pixel = (i: number): number => {
    if (bits === -32) return bytes.readFloatBE(start + 4 * i)
    if (bits === 8) return bytes.readUInt8(start + i)
    throw new Error(`fixtures/stretch/${name} has BITPIX ${bits}; the test reader knows -32 and 8.`)
  }
  const planes = Array.from({ length: depth }, (_, plane) =>
    Float64Array.from({ length: width * height }, (_, i) => pixel(plane * width * height + i)),
  )
  return { width, height, planes }
}

export function readReference<Shape>(): Shape {
  return JSON.parse(readFileSync(path.join(FOLDER, 'stretch.json'), 'utf8')) as Shape
}

/** The image a row of the reference names. */
export function imageCalled(name: string): Float64Array {
  const plane = /^cube plane ([gri])$/.exec(name)
  if (plane) return readFixture('cube_gri.fits').planes['gri'.indexOf(plane[1])]
  return readFixture(`${name}.fits`).planes[0]
}
