import { describe, expect, it } from 'vitest'
import { cropField } from './crop-field'
import type { BandPlane } from './normalise-planes'

const plane = (width: number, height: number): BandPlane => ({
  band: 'g',
  width,
  height,
  data: Float32Array.from({ length: width * height }, (_, i) => 1000 * Math.floor(i / width) + (i % width)),
})

describe('the close field', () => {
  it('is 12 arcsec of pixels of 0.2 arcsec round the same middle, and says where it was cut', () => {
    const cropped = cropField(plane(80, 80), 0.2, 12)
    expect(cropped).toMatchObject({ left: 10, bottom: 10, plane: { width: 60, height: 60 } })
    expect(cropped?.plane.data[0]).toBe(10 * 1000 + 10)
    expect(cropped?.plane.data.at(-1)).toBe(69 * 1000 + 69)
  })

  it('keeps an odd cutout odd, so that its middle pixel stays in the middle', () => {
    const cropped = cropField(plane(81, 81), 0.2, 12)
    expect([59, 61]).toContain(cropped?.plane.width)
    const { width, data } = cropped?.plane ?? plane(1, 1)
    expect(data[((width - 1) / 2) * width + (width - 1) / 2]).toBe(40 * 1000 + 40)
  })

  it('keeps a side whole that is shorter than the field, and cuts the other', () => {
    const cropped = cropField(plane(40, 100), 0.2, 12)
    expect(cropped).toMatchObject({ left: 0, bottom: 20, plane: { width: 40, height: 60 } })
  })

  it('has at least a pixel, and does not exist without a scale', () => {
    expect(cropField(plane(9, 9), 1, 0.1)?.plane.width).toBe(1)
    expect(cropField(plane(80, 80), null, 12)).toBeNull()
    expect(cropField(plane(80, 80), 0, 12)).toBeNull()
    expect(cropField(plane(80, 80), 0.2, Number.NaN)).toBeNull()
  })
})
