/** A simulated galaxy without a lens, as planes to paint on, and paintings to put on it. */
import { simulateCandidate, type SimulatedKind } from '../simulate-candidate'
import type { Wcs } from '@/lib/science/sky/wcs'
import type { PlaneToPaint } from './paint-lens'
import type { Painting } from './painting-ranges'

export const SCALE = 0.2

export const wcsOf = (width: number, height: number, change: Partial<Wcs> = {}): Wcs => ({
  projection: 'TAN',
  frame: 'ICRS',
  referencePixel: [(width + 1) / 2, (height + 1) / 2],
  referencePoint: [150, 2],
  matrix: [
    [-SCALE / 3600, 0],
    [0, SCALE / 3600],
  ],
  poleLongitudeDeg: 180,
  sip: null,
  size: [width, height],
  ...change,
})

export function galaxyPlanes(seed: number, kind: SimulatedKind = 'elliptical'): PlaneToPaint[] {
  const { bands, width, height } = simulateCandidate(kind, seed)
  return bands.map(({ band, data }) => ({
    band,
    data,
    width,
    height,
    wcs: wcsOf(width, height),
    pixelScaleArcsec: SCALE,
    header: {},
  }))
}

export const PAINTING: Painting = {
  einsteinRadiusArcsec: 1.5,
  axisRatio: 0.8,
  positionAngleDeg: 40,
  shear: { strength: 0, positionAngleDeg: 0 },
  source: { east: 0.2, north: 0.3, effectiveRadiusArcsec: 0.15, sersicIndex: 1, axisRatio: 1, positionAngleDeg: 0 },
  colour: { gMinusR: 0.1, rMinusI: 0.1 },
  arcSignalToNoise: 40,
}

export const total = (values: ArrayLike<number>): number => Array.from(values).reduce((sum, value) => sum + value, 0)
