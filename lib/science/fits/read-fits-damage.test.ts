import { readFileSync, readdirSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { FitsError } from '@/lib/science/fits/fits-types'
import { readFits } from '@/lib/science/fits/read-fits'

const FOLDER = 'fixtures/fits'
const names = readdirSync(FOLDER).filter((name) => /^[gcpw]_.*\.(fits|gz|fz)$/.test(name))
const files = names.map((name) => new Uint8Array(readFileSync(`${FOLDER}/${name}`)))
const LIMITS = { maxBytes: 4 * 1024 * 1024, maxPixels: 1024 * 1024 }

/** Whole images, or FitsError, and nothing else. */
async function expectImagesOrRefusal(bytes: Uint8Array) {
  try {
    const { images } = await readFits(bytes, LIMITS)
    expect(images.length).toBeGreaterThan(0)
    for (const { width, height, planes } of images) {
      expect(planes.length).toBeGreaterThan(0)
      expect(planes.every((plane) => plane.length === width * height)).toBe(true)
    }
  } catch (error) {
    if (!(error instanceof FitsError)) throw error
  }
}

const anyFile = fc.constantFrom(...files)
/** Places where bytes matter: mostly the header and the first rows of a table, sometimes anywhere. */
const place = fc.oneof(fc.nat(2880), fc.nat(2880 * 4), fc.nat(30000))

describe('readFits on damaged files', () => {
  it('gives images or a FitsError when bytes are changed', async () => {
    const damage = fc.array(fc.tuple(place, fc.nat(255)), { minLength: 1, maxLength: 12 })
    await fc.assert(
      fc.asyncProperty(anyFile, damage, async (file, changes) => {
        const bytes = file.slice()
        for (const [at, byte] of changes) bytes[at % bytes.length] = byte
        await expectImagesOrRefusal(bytes)
      }),
      { numRuns: 400, seed: 2 },
    )
  })

  it('gives images or a FitsError when digits of the header are changed', async () => {
    const damage = fc.array(fc.tuple(fc.nat(), fc.constantFrom(...'0123456789-.ET ')), { minLength: 1, maxLength: 4 })
    await fc.assert(
      fc.asyncProperty(anyFile, damage, async (file, changes) => {
        const bytes = file.slice()
        const digits = [...bytes.subarray(0, 11520).keys()].filter((at) => bytes[at] >= 0x30 && bytes[at] <= 0x39)
        for (const [pick, letter] of changes) bytes[digits[pick % digits.length]] = letter.charCodeAt(0)
        await expectImagesOrRefusal(bytes)
      }),
      { numRuns: 400, seed: 3 },
    )
  })

  it('gives images or a FitsError when the file is cut off anywhere', async () => {
    await fc.assert(
      fc.asyncProperty(anyFile, fc.nat(), (file, length) =>
        expectImagesOrRefusal(file.subarray(0, length % file.length)),
      ),
      { numRuns: 300, seed: 4 },
    )
  })

  it('gives a FitsError for bytes that are no file at all', async () => {
    await fc.assert(
      fc.asyncProperty(fc.uint8Array({ maxLength: 6000 }), async (bytes) => {
        await expect(readFits(bytes, LIMITS)).rejects.toBeInstanceOf(FitsError)
      }),
      { numRuns: 100, seed: 5 },
    )
  })
})
