import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { voteAgreement } from '@/lib/science/agreement/vote-agreement'

const reference = readFixture('vote-vectors.json')

describe('voteAgreement', () => {
  // Exact fractions and R agrmt (agreement, consensus, entropy) on vectors of four grades.
  it.each(reference.vectors)('equals R agrmt: $name', ({ counts, entropy_bits, van_der_eijk_A, consensus }) => {
    const result = voteAgreement(counts)
    expect(result.entropyBits).toBeCloseTo(entropy_bits, 9)
    expect(result.vanDerEijkA).toBeCloseTo(van_der_eijk_A, 9)
    expect(result.consensus).toBeCloseTo(consensus, 9)
  })

  // C. van der Eijk (2001), p. 331 (A = 0.61), and the vignette of R agrmt; two decimals printed.
  it.each(reference.printed_examples)('equals the printed A of $counts', (example) => {
    const result = voteAgreement(example.counts)
    expect(result.vanDerEijkA).toBeCloseTo(example.published.A, 2)
    expect(result.vanDerEijkA).toBeCloseTo(example.van_der_eijk_A, 9)
    expect(result.consensus).toBeCloseTo(example.published.consensus ?? example.consensus, 6)
    expect(result.entropyBits).toBeCloseTo(example.entropy_bits, 9)
  })

  it('says nothing of no votes and refuses counts that cannot be', () => {
    expect(voteAgreement([0, 0, 0, 0])).toEqual({ entropyBits: null, vanDerEijkA: null, consensus: null })
    expect(() => voteAgreement([1, -1, 0])).toThrow('0 or more')
    expect(() => voteAgreement([1, 1])).toThrow('three categories')
  })
})
