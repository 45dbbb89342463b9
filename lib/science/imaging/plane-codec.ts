/**
 * The pixel planes of a candidate as one compact block, for drawing them where they are looked at.
 *
 * A pixel is stored in units of its band's sky noise, v = (pixel - background) / noise, as the 16-bit code
 *   code = round(1024 asinh(v / 16)) - lowest,   v = 16 sinh((code + lowest) / 1024),
 * the inverse hyperbolic sine of Lupton et al. 1999, AJ 118, 1406: 64 levels per sigma at the sky, 1024 per factor e far
 * above it. So |error of v| <= sqrt(v^2 + 16^2) / 2048 (1 + 1e-3): below 1/127 sigma at the sky, 0.05 % of bright pixels.
 * Beyond 1e12 sigma (2 x 26,165 codes fit into 65,535) values are held at it. 65,535 is no data.
 *
 * Layout: `RSPX`, the length of the head as little-endian 32-bit, the head as JSON in UTF-8, then for each plane its codes'
 * low bytes and after them its high bytes (which zip well), rows as in FITS, row 0 = bottom. Meant to be gzipped.
 */
import type { NormalisedPlane } from './normalise-planes'
import type { Recipe } from './recipe'

const MAGIC = 'RSPX'
const VERSION = 2
const SOFTENING_SIGMA = 16
const CODES_PER_E = 1024
const MOST_SIGMA = 1e12
const NO_DATA = 0xffff

/** The pixels of a band as they are, or what a view needs that was made of them (derived-planes.ts). */
export type PlaneRole = 'band' | 'residual' | 'blue'

export interface PlaneToEncode {
  role: PlaneRole
  band: string
  width: number
  height: number
  /** Row 0 = bottom, in the unit of the file; what is not finite is no data. */
  data: Float32Array
  /** Sky level and noise in the unit of the file. A noise of 0 means that all pixels are equal or none is finite. */
  background: number
  noise: number
  /** Of the band that a derived plane, which is in units of its noise already, was made of. */
  bandNoise?: number
  pixelScaleArcsec: number | null
}

/** The values are in units of the noise, as all views want them. */
export interface DecodedPlane extends NormalisedPlane {
  role: PlaneRole
  background: number
  pixelScaleArcsec: number | null
}

export interface DecodedPlanes {
  planes: DecodedPlane[]
  /** How the pictures of these planes are made. */
  recipe: Recipe
}

/** Clipped pixels of the bands on the grid that they are combined on, by band: not to be found again in coded pixels. */
export type ClippedByBand = Record<string, readonly number[]>

interface Head {
  version: number
  recipe: Recipe
  clipped: ClippedByBand
  planes: (Omit<PlaneToEncode, 'data'> & { lowest: number })[]
}

const codeOf = (sigma: number): number =>
  Math.round(CODES_PER_E * Math.asinh(Math.max(-MOST_SIGMA, Math.min(MOST_SIGMA, sigma)) / SOFTENING_SIGMA))

/** @throws RangeError when the number of pixels of a plane is not width x height. */
export function encodePlanes(
  planes: readonly PlaneToEncode[],
  recipe: Recipe,
  clipped: ClippedByBand = {},
): Uint8Array<ArrayBuffer> {
  const coded = planes.map(encodePlane)
  const head: Head = {
    version: VERSION,
    recipe,
    clipped,
    planes: planes.map(({ data: _pixels, ...facts }, k) => {
      return { ...facts, lowest: coded[k].lowest }
    }),
  }
  const text = new TextEncoder().encode(JSON.stringify(head))
  const bytes = new Uint8Array(8 + text.length + coded.reduce((sum, { codes }) => sum + 2 * codes.length, 0))
  bytes.set(new TextEncoder().encode(MAGIC))
  new DataView(bytes.buffer).setUint32(4, text.length, true)
  bytes.set(text, 8)
  let at = 8 + text.length
  for (const { codes } of coded) {
    for (let i = 0; i < codes.length; i++) {
      bytes[at + i] = codes[i] & 0xff
      bytes[at + codes.length + i] = codes[i] >> 8
    }
    at += 2 * codes.length
  }
  return bytes
}

function encodePlane({ band, width, height, data, background, noise }: PlaneToEncode) {
  if (data.length !== width * height) {
    throw new RangeError(`Band ${band} has ${data.length} pixels, not ${width} x ${height}.`)
  }
  const perSigma = noise > 0 ? 1 / noise : 0
  const raw = new Int32Array(data.length)
  let lowest = Number.POSITIVE_INFINITY
  for (let i = 0; i < data.length; i++) {
    if (data[i] - data[i] !== 0) continue
    raw[i] = codeOf((data[i] - background) * perSigma)
    if (raw[i] < lowest) lowest = raw[i]
  }
  if (lowest === Number.POSITIVE_INFINITY) lowest = 0
  const codes = new Uint16Array(data.length)
  for (let i = 0; i < data.length; i++) codes[i] = data[i] - data[i] === 0 ? raw[i] - lowest : NO_DATA
  return { codes, lowest }
}

const DAMAGED = 'The pixels did not arrive whole. Load the page again.'

/** @throws Error with a sentence for people when the bytes are not such a block, or not all of it. */
export function decodePlanes(bytes: Uint8Array): DecodedPlanes {
  const head = readHead(bytes)
  let at = 8 + headLength(bytes)
  const whole = head.planes.reduce((sum, { width, height }) => sum + 2 * width * height, at)
  if (bytes.length !== whole) throw new Error(DAMAGED)
  const planes = head.planes.map((plane) => {
    const size = plane.width * plane.height
    const decoded = decodePlane(plane, bytes.subarray(at, at + size), bytes.subarray(at + size, at + 2 * size))
    at += 2 * size
    return { ...decoded, clipped: head.clipped[plane.band] ?? [] }
  })
  return { planes, recipe: head.recipe }
}

const headLength = (bytes: Uint8Array): number =>
  new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength).getUint32(4, true)

function readHead(bytes: Uint8Array): Head {
  if (bytes.length < 8 || new TextDecoder().decode(bytes.subarray(0, 4)) !== MAGIC) throw new Error(DAMAGED)
  const end = 8 + headLength(bytes)
  if (end > bytes.length) throw new Error(DAMAGED)
  const head = JSON.parse(new TextDecoder().decode(bytes.subarray(8, end))) as Head
  if (head.version !== VERSION) throw new Error('This page is older than the server. Load it again.')
  return head
}

function decodePlane(plane: Head['planes'][number], low: Uint8Array, high: Uint8Array): DecodedPlane {
  const { role, band, width, height, background, noise, bandNoise, pixelScaleArcsec, lowest } = plane
  const values = new Float32Array(low.length)
  const table = valueTable(lowest, high)
  let missing = 0
  for (let i = 0; i < values.length; i++) {
    const code = low[i] | (high[i] << 8)
    if (code === NO_DATA) missing++
    values[i] = code === NO_DATA ? Number.NaN : table[code]
  }
  const state = missing === values.length ? 'empty' : noise > 0 ? 'usable' : 'constant'
  const sigma = bandNoise ?? noise
  return { role, band, width, height, values, sigma, missing, state, background, pixelScaleArcsec }
}

/** Values of the codes that occur, so that sinh is worked out once a code and not once a pixel. */
function valueTable(lowest: number, high: Uint8Array): Float32Array {
  let most = 0
  for (const byte of high) if (byte > most && byte < 0xff) most = byte
  const last = high.includes(0xff) ? NO_DATA - 1 : (most << 8) | 0xff
  return Float32Array.from(
    { length: last + 1 },
    (_, code) => SOFTENING_SIGMA * Math.sinh((code + lowest) / CODES_PER_E),
  )
}
