import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { percentAgreement } from '@/lib/science/agreement/percent-agreement'

const gwet = readFixture('gwet-missing.json')

describe('percentAgreement', () => {
  // Gwet (2021), Handbook of Inter-Rater Reliability, 5th ed., p. 160 and p. 165; the first also printed by R irrCAC.
  it.each(gwet.sets)('equals the handbook for $name', ({ ratings, percent_agreement }) => {
    expect(percentAgreement(ratings).agreement).toBeCloseTo(percent_agreement, 9)
  })

  it('is the share of units that two raters agree on', () => {
    expect(
      percentAgreement([
        [1, 1],
        [2, 3],
        [0, 0],
        [0, 1],
      ]),
    ).toEqual({ agreement: 0.5, units: 4 })
  })

  it('leaves out units with one rating or none, and is null when none is left', () => {
    expect(percentAgreement([[1, 1], [2, null], []])).toEqual({ agreement: 1, units: 1 })
    expect(percentAgreement([[2, null]])).toEqual({ agreement: null, units: 0 })
  })
})
