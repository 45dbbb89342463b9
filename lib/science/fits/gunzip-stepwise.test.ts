import { gzipSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { FitsError } from './fits-types'
import { gunzipStepwise } from './gunzip-stepwise'
import { readFits } from './read-fits'
import { writeFits } from './write-fits'

const MIB = 1024 * 1024
const image = writeFits([{ width: 80, height: 80, data: new Float32Array(6400).map((_, i) => i % 97), header: [] }])

function withMore(...parts: Uint8Array[]): Uint8Array {
  return gzipSync(Buffer.concat([image, ...parts]), { level: 1 })
}

const cards = (...lines: string[]): Uint8Array =>
  new TextEncoder().encode(
    [...lines, 'END']
      .map((line) => line.padEnd(80))
      .join('')
      .padEnd(2880),
  )

const extension = (kind: string, bitpix: number, ...axes: number[]): Uint8Array =>
  cards(
    `XTENSION= '${kind.padEnd(8)}'`,
    `BITPIX  = ${bitpix}`,
    `NAXIS   = ${axes.length}`,
    ...axes.map((length, k) => `NAXIS${k + 1}  = ${length}`),
    'PCOUNT  = 0',
    'GCOUNT  = 1',
    ...(kind === 'BINTABLE' ? ['TFIELDS = 1', `TFORM1  = '${axes[0]}B'`] : []),
  )

/** How many bytes were unpacked before the refusal, and what it says. */
async function refusalOf(packed: Uint8Array): Promise<{ unpacked: number; error: FitsError }> {
  let unpacked = 0
  const error = await gunzipStepwise(
    packed,
    256 * MIB,
    () => {},
    (bytes) => (unpacked = bytes),
  ).catch((e: unknown) => e)
  if (!(error instanceof FitsError)) throw new Error('It was not refused')
  return { unpacked, error }
}

describe('a gzip file behind whose first image something is hidden', () => {
  const zeros = new Uint8Array(150 * MIB)

  it.each([
    ['zeros that are no HDU', withMore(zeros), 2 * MIB, 'behind its last HDU'],
    ['a table', withMore(extension('BINTABLE', 8, MIB, 150), zeros), 2 * MIB, 'no pictures'],
    [
      'a header without END',
      withMore(cards("XTENSION= 'IMAGE   '").subarray(0, 80), zeros.fill(0x20)),
      2 * MIB,
      'no END',
    ],
    [
      'an image that is larger than any file',
      withMore(extension('IMAGE', 8, 30_000, 30_000), zeros),
      2 * MIB,
      'in all',
    ],
  ])('is refused when it shows and not unpacked: %s', async (_name, packed, most, words) => {
    const { unpacked, error } = await refusalOf(packed)
    expect(unpacked).toBeLessThan(most)
    expect(error.message).toContain(words)
    await expect(readFits(packed)).rejects.toBeInstanceOf(FitsError)
  })

  it('is refused by its pixels before they are unpacked', async () => {
    let unpacked = 0
    const packed = withMore(extension('IMAGE', 8, 12_000, 12_000), zeros)
    const refuse = ({ axes }: { axes: number[] }) => {
      if (axes[0] > 4096) throw new FitsError('too-large', 'too many pixels')
    }
    await expect(gunzipStepwise(packed, 256 * MIB, refuse, (bytes) => (unpacked = bytes))).rejects.toThrow('too many')
    expect(unpacked).toBeLessThan(2 * MIB)
    await expect(readFits(packed)).rejects.toThrow('12000 x 12000 pixels')
  })
})

describe('a large gzip file that is what it says', () => {
  const large = writeFits([
    { width: 1500, height: 1500, data: new Float32Array(1500 * 1500).map((_, i) => i % 1009), header: [] },
  ])

  it('comes out whole, with what little follows its last HDU', async () => {
    const plain = Buffer.concat([large, new Uint8Array(5000)])
    expect(Buffer.compare(await gunzipStepwise(gzipSync(plain), 256 * MIB, () => {}), plain)).toBe(0)
    expect((await readFits(gzipSync(plain))).images[0]).toMatchObject({ width: 1500, height: 1500 })
  })

  it('is refused when it is cut off or damaged at its end', async () => {
    const packed = gzipSync(large)
    await expect(readFits(packed.subarray(0, packed.length - 1000))).rejects.toThrow('it ends before its stream does')
    const damaged = packed.slice()
    damaged[damaged.length - 6] ^= 1
    await expect(readFits(damaged)).rejects.toThrow('its stream is damaged')
  })

  it('is refused when it goes beyond the bytes of one file', async () => {
    await expect(readFits(gzipSync(large), { maxBytes: 5 * MIB, maxPixels: 1e9 })).rejects.toThrow('5242880 bytes')
  })
})
