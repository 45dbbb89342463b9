import { readFileSync, readdirSync } from 'node:fs'
import fc from 'fast-check'
import { describe, it } from 'vitest'
import { FitsError } from '@/lib/science/fits/fits-types'
import { readFits } from '@/lib/science/fits/read-fits'

// 20,000 damaged files in all. The seed of each kind is fixed; fast-check prints it with the smallest damage that fails.
const RUNS = { bytes: 5000, digits: 4000, cards: 3500, cut: 2500, blocks: 2500, descriptors: 2400, junk: 100 }
/** No reading of so small a file may take anywhere near this long, whatever stands in it. */
const HANGS_MS = 120_000

const FOLDER = 'fixtures/fits'
const LARGEST_BYTES = 40_000
const BLOCK = 2880
const CARD = 80
const LIMITS = { maxBytes: 4 * 1024 * 1024, maxPixels: 256 * 1024 }

const names = readdirSync(FOLDER).filter((name) => /^[gcpw]_.*\.(fits|gz|fz)$/.test(name))
const files = names
  .map((name) => new Uint8Array(readFileSync(`${FOLDER}/${name}`)))
  .filter((bytes) => bytes.length <= LARGEST_BYTES)
const compressed = files.filter((bytes) => new TextDecoder('latin1').decode(bytes).includes('ZCMPTYPE'))
const anyFile = fc.constantFrom(...files)

/** Whole images, or FitsError, and nothing else. */
async function expectImagesOrRefusal(bytes: Uint8Array): Promise<void> {
  try {
    const { images } = await readFits(bytes, LIMITS)
    const whole = images.every(
      ({ width, height, planes }) => planes.length > 0 && planes.every((plane) => plane.length === width * height),
    )
    if (images.length === 0 || !whole) throw new Error('The images are not whole.')
  } catch (error) {
    if (!(error instanceof FitsError)) throw error
    if (!/^[\x20-\x7e]{20,400}\.$/.test(error.message))
      throw new Error(`No sentence: ${error.message}`, { cause: error })
  }
}

/** Places where bytes matter: mostly the header and the first rows of a table, sometimes anywhere. */
const place = fc.oneof(fc.nat(BLOCK), fc.nat(BLOCK * 4), fc.nat(LARGEST_BYTES))
const digits = new WeakMap<Uint8Array, number[]>()

function digitsOf(file: Uint8Array): number[] {
  const found =
    digits.get(file) ?? [...file.subarray(0, 4 * BLOCK).keys()].filter((at) => file[at] >= 0x30 && file[at] <= 0x39)
  digits.set(file, found)
  return found
}

/** Where the data of the first table begin: behind the block with the second END card. */
function tableStart(file: Uint8Array): number {
  let ends = 0
  for (let at = 0; at + CARD <= file.length; at += CARD) {
    if (new TextDecoder('latin1').decode(file.subarray(at, at + 8)) === 'END     ' && ++ends === 2)
      return Math.ceil((at + CARD) / BLOCK) * BLOCK
  }
  return 0
}
const tables = new Map<Uint8Array, number>(compressed.map((file) => [file, tableStart(file)]))

const VALUES = [
  'T',
  'F',
  '0',
  '-1',
  '1',
  '2',
  '7',
  '8',
  '16',
  '-32',
  '64',
  '999',
  '2147483648',
  '1.5D+3',
  "''",
  "'1PB(9)'",
  '1E400',
  '(1, 2)',
  '',
]
const card = fc.record({ from: fc.nat(107), to: fc.nat(107), value: fc.constantFrom(...VALUES), kind: fc.nat(3) })

/** A card gets another value, is copied over another, is blanked, or becomes END. */
function damageCard(
  bytes: Uint8Array,
  { from, to, value, kind }: { from: number; to: number; value: string; kind: number },
) {
  const cards = Math.floor(bytes.length / CARD)
  const at = CARD * (from % cards)
  if (kind === 0) bytes.set(new TextEncoder().encode(`= ${value.padStart(20)}`.padEnd(72)), at + 8)
  else if (kind === 1) bytes.copyWithin(CARD * (to % cards), at, at + CARD)
  else bytes.set(new TextEncoder().encode((kind === 2 ? '' : 'END').padEnd(CARD)), at)
}

/** @param damage changes the copy that it is given, or gives another. */
function check<T>(
  runs: number,
  seed: number,
  file: fc.Arbitrary<Uint8Array>,
  damage: fc.Arbitrary<T>,
  apply: (bytes: Uint8Array, damage: T, file: Uint8Array) => Uint8Array | void,
): Promise<void> {
  const property = fc.asyncProperty(file, damage, (original, how) => {
    const copy = original.slice()
    return expectImagesOrRefusal(apply(copy, how, original) ?? copy)
  })
  return fc.assert(property, { numRuns: runs, seed, endOnFailure: true })
}

describe('readFits on damaged files gives images or a FitsError', { timeout: HANGS_MS }, () => {
  it('when bytes are changed and bits are turned over', async () => {
    const change = fc.tuple(place, fc.nat(255), fc.boolean())
    await check(RUNS.bytes, 2, anyFile, fc.array(change, { minLength: 1, maxLength: 12 }), (bytes, changes) => {
      for (const [at, byte, flip] of changes) {
        const i = at % bytes.length
        bytes[i] = flip ? bytes[i] ^ (1 << (byte % 8)) : byte
      }
    })
  })

  it('when digits of the header are changed', async () => {
    const change = fc.tuple(fc.nat(), fc.constantFrom(...'0123456789-.ET '))
    await check(RUNS.digits, 3, anyFile, fc.array(change, { minLength: 1, maxLength: 4 }), (bytes, changes, file) => {
      const places = digitsOf(file)
      for (const [pick, letter] of changes) bytes[places[pick % places.length]] = letter.charCodeAt(0)
    })
  })

  it('when cards of the header get other values, are doubled, are lost or end it', async () => {
    await check(RUNS.cards, 6, anyFile, fc.array(card, { minLength: 1, maxLength: 3 }), (bytes, cards) => {
      for (const one of cards) damageCard(bytes, one)
    })
  })

  it('when the file is cut off anywhere', async () => {
    await check(RUNS.cut, 4, anyFile, fc.nat(), (bytes, length) => bytes.subarray(0, length % bytes.length))
  })

  it('when blocks change places, are doubled or are lost', async () => {
    const move = fc.tuple(fc.nat(13), fc.nat(13), fc.nat(2))
    await check(RUNS.blocks, 7, anyFile, move, (bytes, [from, to, kind]) => {
      const blocks = Math.max(1, Math.floor(bytes.length / BLOCK))
      const [a, b] = [BLOCK * (from % blocks), BLOCK * (to % blocks)]
      const first = bytes.slice(a, a + BLOCK)
      if (kind === 2) return new Uint8Array([...bytes.subarray(0, a), ...bytes.subarray(a + BLOCK)])
      if (kind === 1) bytes.copyWithin(a, b, b + first.length)
      bytes.set(first.subarray(0, bytes.length - b), b)
      return bytes
    })
  })

  it('when the descriptors of a compressed table or the bytes behind them are damaged', async () => {
    const change = fc.tuple(fc.nat(600), fc.oneof(fc.constantFrom(0, 1, 127, 128, 255), fc.nat(255)))
    const damage = fc.array(change, { minLength: 1, maxLength: 6 })
    await check(RUNS.descriptors, 8, fc.constantFrom(...compressed), damage, (bytes, changes, file) => {
      for (const [at, byte] of changes) bytes[Math.min(bytes.length - 1, (tables.get(file) ?? 0) + at)] = byte
    })
  })

  it('and only a FitsError for bytes that are no file at all', async () => {
    const property = fc.asyncProperty(fc.uint8Array({ maxLength: 6000 }), async (bytes) => {
      const outcome = await readFits(bytes, LIMITS).catch((error: unknown) => error)
      if (!(outcome instanceof FitsError)) throw new Error('It was not refused.')
    })
    await fc.assert(property, { numRuns: RUNS.junk, seed: 5 })
  })
})
