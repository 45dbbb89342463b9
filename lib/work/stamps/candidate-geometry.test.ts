import { describe, expect, it } from 'vitest'
import type { Wcs } from '@/lib/science/sky/wcs'
import { candidateGeometry, planeOrientation, viewGeometry, type PlaneFacts } from './candidate-geometry'

/** TAN with square pixels; north stands this far counter-clockwise from up, east left of it. */
function wcs(scaleArcsec: number, northAngleDeg = 0): string {
  const scale = scaleArcsec / 3600
  const a = (northAngleDeg * Math.PI) / 180
  const matrix = [
    [-scale * Math.cos(a), -scale * Math.sin(a)],
    [-scale * Math.sin(a), scale * Math.cos(a)],
  ] as const
  const solution: Wcs = {
    projection: 'TAN',
    frame: 'ICRS',
    referencePixel: [20, 20],
    referencePoint: [150, 2],
    matrix,
    poleLongitudeDeg: 180,
    sip: null,
    size: [40, 40],
  }
  return JSON.stringify(solution)
}

const plane = (band: string, side: number, scale: number | null, more: Partial<PlaneFacts> = {}): PlaneFacts => ({
  band,
  width: side,
  height: side,
  wcs: scale === null ? null : wcs(scale),
  pixelScaleArcsec: scale,
  candidateScaleArcsec: scale,
  ...more,
})

const view = (key: string, side: number) => ({ key, width: side, height: side })
const scaleOf = (planes: PlaneFacts[], key: string, side: number) =>
  viewGeometry(planes, view(key, side), false).pixelScaleArcsec

describe('the scale of a view', () => {
  it('is that of all bands where they agree, and a manifest’s before a header’s', () => {
    const planes = [plane('g', 40, 0.2), plane('r', 40, 0.201)]
    expect(scaleOf(planes, 'colour', 40)).toBe(0.2)
    const told = planes.map((one) => ({ ...one, candidateScaleArcsec: 0.25 }))
    expect(scaleOf(told, 'band:r', 40)).toBe(0.25)
  })

  it('is each band’s own where bands differ, and the finest in views made of several', () => {
    const planes = [plane('g', 40, 0.2), plane('VIS', 80, 0.1)]
    expect(candidateGeometry(planes).pixelScaleArcsec).toBeNull()
    expect(scaleOf(planes, 'band:g', 40)).toBe(0.2)
    expect(scaleOf(planes, 'band:VIS', 80)).toBe(0.1)
    expect(scaleOf(planes, 'colour', 80)).toBe(0.1)
  })

  it('is not told where it would be a guess: a band without one of a size of its own, a view of another size', () => {
    const planes = [plane('g', 40, 0.2), plane('r', 64, null), plane('i', 40, null)]
    expect(scaleOf(planes, 'band:r', 64)).toBeNull()
    expect(scaleOf(planes, 'colour', 64)).toBeNull()
    expect(scaleOf(planes, 'band:i', 40)).toBe(0.2)
  })

  it('is the manifest’s for bands that tell none, and unknown without one', () => {
    expect(scaleOf([plane('g', 40, null, { candidateScaleArcsec: 0.3 })], 'deep', 40)).toBe(0.3)
    expect(scaleOf([plane('g', 40, null)], 'deep', 40)).toBeNull()
    expect(scaleOf([], 'deep', 40)).toBeNull()
  })
})

describe('the compass of a view', () => {
  const turned = [plane('g', 40, 0.2, { wcs: wcs(0.2, 30) }), plane('r', 40, 0.2, { wcs: wcs(0.2, 30) })]

  it('is that of the header, and north up where the recipe turns pictures', () => {
    expect(planeOrientation(turned[0].wcs)?.northAngleDeg).toBeCloseTo(30, 4)
    expect(candidateGeometry(turned).northAngleDeg).toBeCloseTo(30, 4)
    expect(viewGeometry(turned, view('colour', 40), true)).toEqual({
      pixelScaleArcsec: 0.2,
      northAngleDeg: 0,
      eastLeft: true,
    })
  })

  it('is north up where bands lie differently, as they are turned to be combined', () => {
    const planes = [turned[0], plane('r', 40, 0.2)]
    expect(candidateGeometry(planes)).toMatchObject({ northAngleDeg: 0, eastLeft: true })
  })

  it('is not drawn without a WCS, whatever the recipe asks', () => {
    expect(viewGeometry([plane('g', 40, null)], view('deep', 40), true).northAngleDeg).toBeNull()
    expect(planeOrientation(null)).toBeNull()
  })
})
