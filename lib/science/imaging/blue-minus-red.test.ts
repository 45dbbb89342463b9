import { describe, expect, it } from 'vitest'
import { simulateWithTruth } from '@/lib/science/lensing/simulate-candidate'
import { blueMinusRed } from './blue-minus-red'
import { findCore } from './lens-light/find-core'
import { normalisePlane } from './normalise-planes'

function planesOf(kind: 'elliptical' | 'lens-arc', seed: number) {
  const { candidate, truth } = simulateWithTruth(kind, seed)
  const planes = candidate.bands.map(({ band, data }) => normalisePlane({ band, width: 80, height: 80, data }))
  return { planes, truth, core: findCore(planes) ?? { x: 39.5, y: 39.5 } }
}

describe('blue minus scaled red', () => {
  it('takes a galaxy of one colour off without a model of it, whatever its seeing', () => {
    const { planes, core } = planesOf('elliptical', 4)
    const difference = blueMinusRed(planes[0], planes[2], core.x, core.y)
    let squares = 0
    let before = 0
    let count = 0
    difference?.values.forEach((value, i) => {
      if (Math.hypot((i % 80) - core.x, Math.floor(i / 80) - core.y) > 5) return
      squares += (value / difference.sigma) ** 2
      before += planes[0].values[i] ** 2
      count++
    })
    expect(Math.sqrt(before / count)).toBeGreaterThan(15)
    expect(Math.sqrt(squares / count)).toBeLessThan(2.5)
    // The survey's g is blurred by (0.8^2 - 0.72^2) / 5.545 arcsec^2 more than its i: 0.55 pixels^2.
    expect(difference?.blurPixels2).toBeGreaterThan(0.2)
    expect(difference?.blurPixels2).toBeLessThan(0.9)
  })

  it('keeps most of a blue arc', () => {
    const { planes, truth, core } = planesOf('lens-arc', 3)
    const difference = blueMinusRed(planes[0], planes[2], core.x, core.y)
    let product = 0
    let square = 0
    truth[0].lensed.forEach((light, i) => {
      product += (light / planes[0].sigma) * (difference?.values[i] ?? 0)
      square += (light / planes[0].sigma) ** 2
    })
    expect(product / square).toBeGreaterThan(0.6)
    expect(product / square).toBeLessThan(1.1)
  })

  it('has no data where either band has none', () => {
    const { planes, core } = planesOf('elliptical', 4)
    planes[2].values[100] = Number.NaN
    planes[0].values[5000] = Number.NaN
    const difference = blueMinusRed(planes[0], planes[2], core.x, core.y)
    expect(difference?.values[100]).toBeNaN()
    expect(difference?.values[5000]).toBeNaN()
    expect(difference?.values[3000]).not.toBeNaN()
  })

  it('does not exist where there is nothing to scale by', () => {
    const { planes } = planesOf('elliptical', 4)
    const dark = { ...planes[2], values: new Float32Array(6400) }
    expect(blueMinusRed(planes[0], dark, 39.5, 39.5)).toBeNull()
  })
})
