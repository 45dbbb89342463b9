import { describe, expect, it } from 'vitest'
import { integrate } from './integrate'
import { logGamma } from './log-gamma'
import { sersicB, sersicBrightness, sersicTotalLight } from './sersic'

/** Light of a round profile of brightness 1 at R_e = 1, inside radius r, by quadrature in R = s^n, smooth at 0. */
function lightInside(r: number, n: number): number {
  const b = sersicB(n)
  const integrand = (s: number) => 2 * Math.PI * s ** n * Math.exp(-b * (s - 1)) * n * s ** (n - 1)
  return integrate(integrand, 0, r ** (1 / n))
}

describe('the Sersic profile', () => {
  // The exact roots of gamma(2n, b) = Gamma(2n) / 2 are 1.67834699 and 7.66924944 (scipy.special.gammaincinv(2n, 0.5));
  // the series of Ciotti & Bertin 1999 is asymptotic in n.
  it('has the b of Ciotti & Bertin', () => {
    expect(Math.abs(sersicB(1) / 1.67834699 - 1)).toBeLessThan(3e-5)
    expect(Math.abs(sersicB(4) / 7.66924944 - 1)).toBeLessThan(1e-7)
  })

  it.each([0.5, 1, 2, 3, 4, 6])('of index %s has half its light inside the effective radius', (n) => {
    const total = sersicTotalLight(1, n)
    expect(lightInside(1, n) / total).toBeCloseTo(0.5, n < 1 ? 3 : n < 2 ? 4 : 5)
    expect(lightInside(40 ** n, n) / total).toBeCloseTo(1, 8)
  })

  it('is scaled to a total light of 1, whatever its shape', () => {
    const profile = { effectiveRadiusArcsec: 0.8, index: 1, axisRatio: 0.5, positionAngleDeg: 30, x: 0.3, y: -0.2 }
    const brightness = sersicBrightness(profile)
    const step = 0.05
    let sum = 0
    for (let y = -8; y < 8; y += step) for (let x = -8; x < 8; x += step) sum += brightness(x, y) * step * step
    expect(sum).toBeCloseTo(1, 3)
  })

  it('is long along its position angle, counted from up to the left', () => {
    const brightness = sersicBrightness({
      effectiveRadiusArcsec: 1,
      index: 1,
      axisRatio: 0.4,
      positionAngleDeg: 45,
      x: 0,
      y: 0,
    })
    expect(brightness(-1, 1)).toBeGreaterThan(3 * brightness(1, 1))
    expect(brightness(-1, 1)).toBeCloseTo(brightness(1, -1), 12)
  })

  it('refuses an index out of range of the series', () => {
    const profile = { effectiveRadiusArcsec: 1, index: 0.2, axisRatio: 1, positionAngleDeg: 0, x: 0, y: 0 }
    expect(() => sersicBrightness(profile)).toThrow('index below 0.36')
  })
})

describe('the logarithm of the gamma function', () => {
  it('gives factorials and the square root of pi', () => {
    expect(logGamma(1)).toBeCloseTo(0, 12)
    expect(logGamma(11)).toBeCloseTo(Math.log(3628800), 11)
    expect(logGamma(0.5)).toBeCloseTo(Math.log(Math.sqrt(Math.PI)), 12)
    expect(logGamma(0.25) + logGamma(0.75)).toBeCloseTo(Math.log(Math.PI * Math.SQRT2), 12)
  })
})
