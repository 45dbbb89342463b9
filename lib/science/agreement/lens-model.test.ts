import { describe, expect, it } from 'vitest'
import { lensShareWithPrior } from '@/lib/science/agreement/lens-model'

describe('the share of lenses with the prior in it', () => {
  it('is that of the prior without a graded candidate, and nearly that of the grades with many', () => {
    expect(lensShareWithPrior(NaN, 0)).toBe(0.02)
    expect(lensShareWithPrior(0.5, 1)).toBeCloseTo(0.26, 12)
    expect(lensShareWithPrior(0.1, 9999)).toBeCloseTo(0.099992, 12)
  })

  it('is never certain', () => {
    expect(lensShareWithPrior(0, 1_000_000)).toBeGreaterThan(0)
    expect(lensShareWithPrior(1, 1_000_000)).toBeLessThan(1)
  })
})
