import { describe, expect, it } from 'vitest'
import { boundariesReaching, exactOperation, lookSteps, waldExpectedLooks } from '@/lib/science/agreement/sample-number'
import { waldBoundaries } from '@/lib/science/agreement/sequential-test'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'

/** A look that says yes with probability p for lenses and 1 - p for what is none: steps of plus and minus one unit. */
const coin = (p: number) => lookSteps([{ lens: [p, 1 - p], notLens: [1 - p, p] }])
const unit = (p: number) => Math.log(p / (1 - p))
const noLimit = { leastLooks: 1, mostLooks: 5000 }

describe('exactOperation', () => {
  // Gambler's ruin: W. Feller (1968), An Introduction to Probability Theory I, 3rd ed., XIV.2 (2.4) and XIV.3 (3.4), for
  // a start in the middle of 2m steps: P(up) = 1 / (1 + r^m), E(n) = m / (p - q) * (1 - r^m) / (1 + r^m), r = q / p.
  it.each([
    [0.6, 4],
    [0.7, 3],
    [0.9, 2],
    [0.55, 7],
  ])('equals the gambler’s ruin for p = %d and %d steps each way', (p, m) => {
    const r = (1 - p) / p
    const bounds = { upper: m * unit(p), lower: -m * unit(p) }
    const { lens, notLens } = exactOperation(coin(p), bounds, noLimit, unit(p))
    expect(lens.confirmed).toBeCloseTo(1 / (1 + r ** m), 10)
    expect(lens.looks).toBeCloseTo(((m / (2 * p - 1)) * (1 - r ** m)) / (1 + r ** m), 8)
    expect(notLens.setAside).toBeCloseTo(lens.confirmed, 12)
    expect(notLens.looks).toBeCloseTo(lens.looks, 8)
  })

  // Without overshoot Wald's approximation is exact (Sequential Analysis, section 3.5).
  it('equals Wald’s expected number where steps end on the boundaries', () => {
    const p = 0.7
    const alpha = 1 / (1 + (p / (1 - p)) ** 3)
    const rates = { falseConfirmed: alpha, missedLens: alpha }
    const { lens, notLens } = exactOperation(coin(p), waldBoundaries(rates), noLimit, unit(p))
    const wald = waldExpectedLooks(rates, coin(p))
    expect(lens.looks).toBeCloseTo(wald.lens, 8)
    expect(notLens.looks).toBeCloseTo(wald.notLens, 8)
  })

  const graders = [
    { lens: [0.5, 0.3, 0.15, 0.05], notLens: [0.02, 0.06, 0.2, 0.72] },
    { lens: [0.3, 0.3, 0.2, 0.2], notLens: [0.05, 0.1, 0.3, 0.55] },
  ]
  const rates = { falseConfirmed: 0.002, missedLens: 0.05 }

  it('holds Wald’s bounds on the errors and takes at least Wald’s number, with graders of four grades', () => {
    const { lens, notLens } = exactOperation(lookSteps(graders), waldBoundaries(rates), noLimit)
    expect(notLens.confirmed).toBeLessThanOrEqual(0.002 / 0.95)
    expect(lens.setAside).toBeLessThanOrEqual(0.05 / 0.998)
    const reached = { falseConfirmed: notLens.confirmed, missedLens: lens.setAside }
    const wald = waldExpectedLooks(reached, lookSteps(graders))
    expect(lens.looks).toBeGreaterThan(wald.lens)
    expect(notLens.looks).toBeGreaterThan(wald.notLens)
    expect(notLens.looks).toBeLessThan(1.6 * wald.notLens)
  })

  it('agrees with 20,000 seeded runs of the test', () => {
    const random = new SeededRandom(11)
    const steps = lookSteps(graders)
    const bounds = waldBoundaries(rates)
    const limits = { leastLooks: 2, mostLooks: 8 }
    const seen = { confirmed: 0, setAside: 0, looks: 0 }
    for (let run = 0; run < 20_000; run++) {
      let evidence = 0
      for (let look = 1; look <= limits.mostLooks; look++) {
        let u = random.uniform()
        evidence += (steps.find((step) => (u -= step.lens) < 0) ?? steps[0]).weight
        seen.looks += 1
        if (look < limits.leastLooks || (evidence < bounds.upper && evidence > bounds.lower)) continue
        seen[evidence > 0 ? 'confirmed' : 'setAside'] += 1
        break
      }
    }
    const { lens } = exactOperation(steps, bounds, limits)
    expect(Math.abs(seen.confirmed / 20_000 - lens.confirmed)).toBeLessThan(0.01)
    expect(Math.abs(seen.setAside / 20_000 - lens.setAside)).toBeLessThan(0.01)
    expect(Math.abs(seen.looks / 20_000 - lens.looks)).toBeLessThan(0.05)
    expect(lens.confirmed + lens.setAside + lens.undecided).toBeCloseTo(1, 10)
  })

  it('keeps everything undecided where looks tell nothing, and Wald’s number is infinite', () => {
    const blind = lookSteps([{ lens: [0.5, 0.5], notLens: [0.5, 0.5] }])
    expect(exactOperation(blind, { upper: 1, lower: -1 }, { leastLooks: 1, mostLooks: 6 }).lens).toEqual({
      confirmed: 0,
      setAside: 0,
      undecided: 1,
      looks: 6,
    })
    expect(waldExpectedLooks(rates, blind)).toEqual({ lens: Infinity, notLens: Infinity })
  })

  it('decides at once on a grade that one class never gets', () => {
    const sure = lookSteps([{ lens: [1, 0], notLens: [0, 1] }])
    const { lens, notLens } = exactOperation(sure, { upper: 5, lower: -5 }, noLimit)
    expect([lens.confirmed, lens.looks, notLens.setAside, notLens.looks]).toEqual([1, 1, 1, 1])
  })
})

describe('boundariesReaching', () => {
  const steps = lookSteps([
    { lens: [0.5, 0.3, 0.15, 0.05], notLens: [0.02, 0.06, 0.2, 0.72] },
    { lens: [0.3, 0.3, 0.2, 0.2], notLens: [0.05, 0.1, 0.3, 0.55] },
  ])
  const rates = { falseConfirmed: 0.002, missedLens: 0.05 }
  const limits = { leastLooks: 1, mostLooks: 30 }
  const narrow = boundariesReaching(rates, steps, limits)
  const wald = waldBoundaries(rates)

  it('lie inside Wald’s and still make no more errors than asked', () => {
    expect(narrow.upper).toBeLessThan(wald.upper)
    expect(narrow.lower).toBeGreaterThan(wald.lower)
    const { lens, notLens } = exactOperation(steps, narrow, limits)
    expect(notLens.confirmed).toBeLessThan(0.002 * 1.05)
    expect(lens.setAside).toBeLessThan(0.05 * 1.05)
  })

  it('need fewer looks', () => {
    const [few, many] = [narrow, wald].map((bounds) => exactOperation(steps, bounds, limits))
    expect(few.notLens.looks).toBeLessThan(many.notLens.looks)
    expect(few.lens.looks).toBeLessThan(many.lens.looks)
  })

  it('are Wald’s where steps end on them', () => {
    const p = 0.7
    const alpha = 1 / (1 + (p / (1 - p)) ** 3)
    const exact = boundariesReaching({ falseConfirmed: alpha * 1.0001, missedLens: alpha * 1.0001 }, coin(p), noLimit)
    // Anything above two steps is three steps.
    expect(exact.upper).toBeGreaterThan(2 * unit(p) - 0.1)
    expect(exact.lower).toBeLessThan(-2 * unit(p) + 0.1)
  })
})
