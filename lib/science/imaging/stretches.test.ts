import { describe, expect, it } from 'vitest'
import { imageCalled, readFixture, readReference } from './_fits-fixture'
import {
  asinhStretch,
  linearStretch,
  logStretch,
  sinhStretch,
  sqrtStretch,
  squaredStretch,
  type Stretch,
} from './stretches'

interface Reference {
  stretch_curves: { stretch: string; x: number[]; y: number[] }[]
  full_images: { vmin: number; vmax: number; stretch: string; sum_of_stretched: number; file_8bit: string }[]
}

const { stretch_curves: curves, full_images: images } = readReference<Reference>()

const BY_NAME: Record<string, Stretch> = {
  'AsinhStretch(a=0.1)': asinhStretch(0.1),
  'AsinhStretch(a=0.01)': asinhStretch(0.01),
  'LogStretch(a=1000)': logStretch(1000),
  'LogStretch(a=100)': logStretch(100),
  SqrtStretch: sqrtStretch,
  LinearStretch: linearStretch,
  'SinhStretch(a=1/3)': sinhStretch(1 / 3),
  SquaredStretch: squaredStretch,
  linear: linearStretch,
  'asinh_a0.1': asinhStretch(0.1),
  log_a1000: logStretch(1000),
  sqrt: sqrtStretch,
}

// astropy 5.2.1, astropy.visualization stretches with clip=True.
describe('stretches', () => {
  it.each(curves)('$stretch follows the curve of astropy', ({ stretch, x, y }) => {
    const curve = BY_NAME[stretch]
    x.forEach((value, k) => expect(curve(value)).toBeCloseTo(y[k], 12))
  })

  // 8-bit rule of the fixture: round 255 y; no value lies within 4e-5 of a boundary, so the counts are exact.
  it.each(images)('$stretch from $vmin to $vmax gives the image of astropy', (row) => {
    const expected = readFixture(row.file_8bit.replace('stretch/', '')).planes[0]
    const stretched = imageCalled('image').map((value) =>
      BY_NAME[row.stretch]((value - row.vmin) / (row.vmax - row.vmin)),
    )
    const sum = stretched.reduce((total, value) => total + value, 0)
    expect(sum).toBeCloseTo(row.sum_of_stretched, 6)
    expect(stretched.map((value) => Math.round(255 * value))).toEqual(expected)
  })

  it('keep 0 and 1, rise between, and pass NaN on', () => {
    for (const curve of Object.values(BY_NAME)) {
      expect(curve(0)).toBe(0)
      expect(curve(1)).toBe(1)
      for (let x = 0; x < 1; x += 0.01) expect(curve(x + 0.01)).toBeGreaterThan(curve(x))
      expect(curve(Number.NaN)).toBeNaN()
    }
  })

  it('refuse a softening that is not above 0', () => {
    expect(() => asinhStretch(0)).toThrow('needs a softening above 0')
    expect(() => logStretch(Number.NaN)).toThrow('needs a softening above 0')
    expect(() => sinhStretch(-1)).toThrow('needs a softening above 0')
  })
})
