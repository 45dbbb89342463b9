import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readFixture, readPanel, readPanelTruth } from '@/lib/science/agreement/_fixtures'
import { fitDawidSkene, type DawidSkeneFit } from '@/lib/science/agreement/dawid-skene'
import { UNKNOWN_TRUTH, type DawidSkeneOptions } from '@/lib/science/agreement/dawid-skene-options'
import { CANNOT_JUDGE, groupByCandidate, type GradesByCandidate } from '@/lib/science/agreement/grade-table'
import { LENS_MODEL } from '@/lib/science/agreement/lens-model'

type Entry = readonly [candidate: number, grader: number, grade: number]

function tableOf(entries: readonly Entry[], candidates: number, graders: number, grades = 4): GradesByCandidate {
  return groupByCandidate({
    candidates,
    graders,
    grades,
    candidateOf: Int32Array.from(entries, ([candidate]) => candidate),
    graderOf: Int32Array.from(entries, ([, grader]) => grader),
    gradeOf: Uint8Array.from(entries, ([, , grade]) => grade),
  })
}

const likelihood: DawidSkeneOptions = { classes: 4, pseudoCounts: 0, shares: 'estimated', tolerance: 1e-10 }

const posteriorOf = (fit: DawidSkeneFit, candidate: number) => [
  ...fit.posterior.slice(candidate * fit.classes, (candidate + 1) * fit.classes),
]
const rowOf = (fit: DawidSkeneFit, grader: number, c: number) => {
  const from = (grader * fit.classes + c) * fit.grades
  return [...fit.confusion.slice(from, from + fit.grades)]
}

function expectNear(actual: ArrayLike<number>, expected: readonly number[], tolerance: number): void {
  expect(actual.length).toBe(expected.length)
  expected.forEach((value, at) => expect(Math.abs(actual[at] - value)).toBeLessThanOrEqual(tolerance))
}

function expectSound(fit: DawidSkeneFit): void {
  const values = [...fit.posterior, ...fit.confusion, ...fit.classShares]
  expect(values.every((value) => value >= 0 && value <= 1)).toBe(true)
  for (let at = 0; at < fit.posterior.length; at += fit.classes) {
    expect(fit.posterior.slice(at, at + fit.classes).reduce((sum, value) => sum + value, 0)).toBeCloseTo(1, 9)
  }
  expect(fit.logLikelihood).toBeLessThanOrEqual(0)
  expect(fit.converged).toBe(true)
}

describe('fitDawidSkene on the anaesthetists of Dawid & Skene (1979), Table 1', () => {
  const reference = readFixture('dawid-skene-1979.json')
  const observerOf = [0, 0, 0, 1, 2, 3, 4]
  const entries = reference.ratings.flatMap((row, patient) =>
    row.map((rating, column): Entry => [patient, observerOf[column], rating - 1]),
  )
  const fit = fitDawidSkene(tableOf(entries, 45, 5), likelihood)

  // Dawid & Skene (1979), class marginals, error rates and posteriors as printed to two decimals.
  it('equals the printed class marginals, error rates and posteriors', () => {
    const { published } = reference
    expectNear(fit.classShares, published.class_marginals, 0.0051)
    published.error_rates.forEach((rows, observer) =>
      rows.forEach((row, c) => expectNear(rowOf(fit, observer, c), row, 0.0051)),
    )
    published.posteriors.forEach((row, patient) => expectNear(posteriorOf(fit, patient), row, 0.0051))
    const likeliest = reference.ratings.map((_, patient) => {
      const posterior = posteriorOf(fit, patient)
      return posterior.indexOf(Math.max(...posterior)) + 1
    })
    expect(likeliest).toEqual(published.hard_classes)
  })

  // Fixed point of the same equations by four implementations (dense numpy, plain Python, dallascard, crowd-kit), to 1e-6.
  it('equals the fixed point that other implementations reach from vote shares, in as many iterations', () => {
    expectNear(fit.classShares, reference.fit.class_marginals, reference.tolerance)
    reference.fit.error_rates.forEach((rows, observer) =>
      rows.forEach((row, c) => expectNear(rowOf(fit, observer, c), row, reference.tolerance)),
    )
    reference.fit.posteriors.forEach((row, patient) => expectNear(posteriorOf(fit, patient), row, reference.tolerance))
    expect(fit.logLikelihood).toBeCloseTo(reference.fit.log_likelihood, 6)
    expect(fit.iterations).toBe(reference.fit.iterations_to_posterior_change_below_1e_10)
    expect(fit.converged).toBe(true)
  })

  it('stays where it is when it starts from its own result', () => {
    const again = fitDawidSkene(tableOf(entries, 45, 5), { ...likelihood, from: fit })
    expect(again.iterations).toBe(2)
    expectNear(again.posterior, [...fit.posterior], 1e-9)
  })

  it('says that it did not converge when it was not given the iterations', () => {
    const short = fitDawidSkene(tableOf(entries, 45, 5), { ...likelihood, maxIterations: 3 })
    expect(short).toMatchObject({ converged: false, iterations: 3 })
    expect(short.change).toBeGreaterThan(1e-10)
  })
})

describe('fitDawidSkene on the seeded panel of 200 items and 8 raters, 40 % missing', () => {
  const reference = readFixture('panel-dawid-skene.json')
  const { raters, ratings } = readPanel()
  const entries = ratings.flatMap((row, item) =>
    row.flatMap((rating, rater): Entry[] => (rating === null ? [] : [[item, rater, rating]])),
  )
  const table = tableOf(entries, 200, 8)

  // Made by numpy 1.24.2; expected values by dense numpy, plain Python, dallascard and crowd-kit 35f0661.
  it('equals four reference implementations', () => {
    const fit = fitDawidSkene(table, likelihood)
    expectNear(fit.classShares, reference.class_marginals, 1e-6)
    raters.forEach((rater, k) =>
      reference.confusions[rater].forEach((row, c) => expectNear(rowOf(fit, k, c), row, 1e-6)),
    )
    Object.values(reference.posteriors).forEach((row, item) => expectNear(posteriorOf(fit, item), row, 1e-6))
    expect(fit.logLikelihood).toBeCloseTo(reference.log_likelihood, 6)
    expect(fit.iterations).toBe(reference.iterations_1e_10)
  })

  it('never lowers the log posterior, with pseudo-counts or without', () => {
    for (const pseudoCounts of [0, 1]) {
      const climb: number[] = []
      fitDawidSkene(table, { ...likelihood, pseudoCounts, onIteration: (state) => climb.push(state.logPosterior) })
      expect(climb.length).toBeGreaterThan(5)
      climb.forEach((value, at) => expect(value).toBeGreaterThanOrEqual((climb[at - 1] ?? -Infinity) - 1e-8))
    }
  })

  it('is the same for grades in any order, and with cannot-judge answers between them', () => {
    const fit = fitDawidSkene(table, likelihood)
    const turned = [...entries].reverse().flatMap((entry): Entry[] => [entry, [entry[0], entry[1], CANNOT_JUDGE]])
    expectNear(fitDawidSkene(tableOf(turned, 200, 8), likelihood).posterior, [...fit.posterior], 1e-9)
  })

  it('keeps known truths and does not count them into the class shares', () => {
    const truth = readPanelTruth()
    const half = truth.map((c, item) => (item % 2 === 0 ? c : UNKNOWN_TRUTH))
    const clamped = fitDawidSkene(table, { ...likelihood, pseudoCounts: 1, truth: half })
    half.forEach((c, item) => {
      if (c !== UNKNOWN_TRUTH) expect(posteriorOf(clamped, item)[c]).toBe(1)
    })
    const unknown = half.flatMap((c, item) => (c === UNKNOWN_TRUTH ? [item] : []))
    const mean = [0, 1, 2, 3].map((c) => unknown.reduce((sum, item) => sum + posteriorOf(clamped, item)[c], 0) / 100)
    expectNear(clamped.classShares, mean, 1e-6)
  })

  it('takes confusion straight from the counts when every truth is known', () => {
    const truth = readPanelTruth()
    const fit = fitDawidSkene(table, { ...likelihood, pseudoCounts: 1, truth })
    const given = entries.filter(([item, rater]) => rater === 0 && truth[item] === 0)
    const first = (given.filter(([, , grade]) => grade === 0).length + 1) / (given.length + 4)
    expect(rowOf(fit, 0, 0)[0]).toBeCloseTo(first, 12)
    expect(fit.logLikelihood).toBeLessThan(0)
  })

  it('is the same with a fifth grade and class that nobody uses', () => {
    const fit = fitDawidSkene(table, likelihood)
    const wider = fitDawidSkene(tableOf(entries, 200, 8, 5), { ...likelihood, classes: 5 })
    expect(wider.iterations).toBe(fit.iterations)
    expectNear(wider.classShares, [...fit.classShares, 0], 1e-9)
    ratings.forEach((_, item) => expectNear(posteriorOf(wider, item), [...posteriorOf(fit, item), 0], 1e-9))
  })

  it('holds the class shares that it is told to hold', () => {
    const shares = [0.7, 0.1, 0.1, 0.1]
    expect([...fitDawidSkene(table, { ...likelihood, shares }).classShares]).toEqual(shares)
  })
})

describe('fitDawidSkene with little to go on', () => {
  const random = (entries: number) =>
    Array.from({ length: entries }, (_, at): Entry => [at, (at * 7) % 3, (at * at + at) % 4])

  it.each([
    ['one grade a candidate', tableOf(random(60), 60, 3)],
    [
      'one grader',
      tableOf(
        random(40).map(([candidate, , grade]): Entry => [candidate, 0, grade]),
        40,
        1,
      ),
    ],
    [
      'all grades equal',
      tableOf(
        random(60).map(([at, grader]): Entry => [at % 20, grader, 2]),
        20,
        3,
      ),
    ],
    [
      'a grader who always says the same',
      tableOf(
        random(90).map(([at, grader, grade]): Entry => [at % 30, grader, grader === 0 ? 1 : grade]),
        30,
        3,
      ),
    ],
    ['a grader without grades', tableOf([[0, 0, 1]], 1, 2)],
    ['no grade at all', tableOf([], 3, 2)],
    ['no candidate', tableOf([], 0, 0)],
  ])('gives sound numbers for %s', (_, table) => {
    for (const pseudoCounts of [0, 1])
      expectSound(fitDawidSkene(table, { ...likelihood, pseudoCounts, tolerance: 1e-8 }))
    expectSound(fitDawidSkene(table, LENS_MODEL))
  })

  it('gives a candidate without grades the class shares', () => {
    const fit = fitDawidSkene(tableOf([[0, 0, 0], [1, 0, 3], [2, 0, 3]], 4, 1), { ...likelihood, pseudoCounts: 1 }) // prettier-ignore
    expectNear(posteriorOf(fit, 3), [...fit.classShares], 1e-12)
  })

  it('does not underflow with thousands of grades of one candidate', () => {
    const many = Array.from({ length: 5000 }, (_, at): Entry => [0, at % 5, at % 4])
    expectSound(fitDawidSkene(tableOf([...many, [1, 0, 3]], 2, 5), LENS_MODEL))
  })

  it('gives sound numbers for any grades', () => {
    const entry = fc.tuple(fc.nat(7), fc.nat(3), fc.constantFrom(0, 1, 2, 3, CANNOT_JUDGE))
    fc.assert(
      fc.property(fc.array(entry, { maxLength: 60 }), (entries) => {
        expectSound(fitDawidSkene(tableOf(entries, 8, 4), { ...LENS_MODEL, maxIterations: 20_000 }))
      }),
      { numRuns: 50 },
    )
  })
})

describe('fitDawidSkene for two classes under four grades', () => {
  it('needs to be told what a grade says of the class', () => {
    const table = tableOf([[0, 0, 0]], 1, 1)
    expect(() => fitDawidSkene(table, { classes: 2, pseudoCounts: 1, shares: 'estimated' })).toThrow(
      '2 classes under 4 grades need startOfGrade',
    )
  })

  it('starts from vote shares: with no iteration to change it, one A counts wholly for a lens and one C by a third', () => {
    const table = tableOf([[0, 0, 0], [1, 0, 2], [2, 0, 0], [2, 1, 3]], 3, 2) // prettier-ignore
    const fit = fitDawidSkene(table, { ...LENS_MODEL, maxIterations: 0 })
    expectNear(fit.posterior, [1, 0, 1 / 3, 2 / 3, 0.5, 0.5], 1e-12)
  })
})

describe('calibration stamps', () => {
  it('teach that a contrary grader means a lens by N, against the start', () => {
    const stamps = Array.from({ length: 40 }, (_, at): Entry => [at, 0, at % 2 === 0 ? 3 : 0])
    const truth = Array.from({ length: 42 }, (_, at) => (at >= 40 ? UNKNOWN_TRUTH : at % 2))
    const table = tableOf([...stamps, [40, 0, 3], [41, 0, 0]], 42, 1)
    const fit = fitDawidSkene(table, { ...LENS_MODEL, shares: [0.5, 0.5], truth })
    expect(posteriorOf(fit, 40)[0]).toBeGreaterThan(0.75)
    expect(posteriorOf(fit, 41)[0]).toBeLessThan(0.2)
  })
})

describe('a fit outside its domain', () => {
  const table = tableOf([[0, 0, 0]], 1, 1)
  it.each<[Partial<DawidSkeneOptions>, string]>([
    [{ classes: 0 }, 'one class or more'],
    [{ pseudoCounts: -1 }, 'finite and 0 or more'],
    [{ pseudoCounts: [1, 2] }, '2 pseudo-counts for 4 classes and 4 grades'],
    [{ shares: [0.5, 0.5, 0.5, 0] }, 'sum to 1'],
    [{ startOfGrade: [1, 0] }, 'startOfGrade must hold 4 numbers'],
    [{ truth: [1, 2] }, '2 truths for 1 candidates'],
    [{ truth: [4] }, 'Candidate 0 has the known class 4'],
    [{ from: { classShares: [1], confusion: [1] } }, 'other classes, graders or grades'],
  ])('is refused with what is wrong: %j', (change, message) => {
    expect(() => fitDawidSkene(table, { ...likelihood, ...change })).toThrow(message)
  })

  it('is refused for grades of candidates or graders that do not exist', () => {
    expect(() => tableOf([[0, 0, 4]], 1, 1)).toThrow('Entry 0 has the grade 4; there are 4')
    expect(() => tableOf([[1, 0, 0]], 1, 1)).toThrow('Entry 0 has the candidate 1; there are 1')
    expect(() => tableOf([[0, 2, 0]], 1, 1)).toThrow('Entry 0 has the grader 2; there are 1')
  })
})
