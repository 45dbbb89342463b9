import { describe, expect, it } from 'vitest'
import { UNKNOWN_TRUTH } from '@/lib/science/agreement/dawid-skene-options'
import { LENS, NOT_A_LENS } from '@/lib/science/agreement/lens-model'
import { OUTCOMES } from '@/lib/science/agreement/outcomes-at-once'
import { RuleInput } from '@/lib/work/campaigns/rule-input'
import { qualityCurve } from './quality-curve'
import { ruleProblems, tryRule } from './try-rule'
import { decodeWhatIf, encodeWhatIf, type WhatIfColumns } from './what-if-columns'

const code = (state: (typeof OUTCOMES)[number]) => OUTCOMES.indexOf(state)
const MEAN = RuleInput.parse({ method: 'mean', gradesWanted: 4, leastGrades: 2 })

interface Row {
  points: number[]
  evidence?: number
  state?: (typeof OUTCOMES)[number]
  ruled?: boolean
  truth?: number
  notSentOn?: boolean
  /** of a calibration stamp: what each of its looks weighs; 0 when left out */
  weights?: number[]
}

/** Looks of the stamps among the rows: 3 points are an A. */
function stampLooksOf(rows: Row[]): WhatIfColumns['stampLooks'] {
  const stamps = rows.filter(({ truth }) => truth !== undefined)
  const start = [0]
  for (const { points } of stamps) start.push(start.at(-1)! + points.length)
  return {
    start: Int32Array.from(start),
    grade: Uint8Array.from(stamps.flatMap(({ points }) => points.map((one) => 3 - one))),
    weight: Float64Array.from(stamps.flatMap(({ points, weights }) => points.map((_, at) => weights?.[at] ?? 0))),
  }
}

/** Rows as the server sends them, through the coding that they travel in. */
function columnsFor(rows: Row[], about: Partial<WhatIfColumns['about']> = {}): WhatIfColumns {
  const sum = (points: number[], of: (x: number) => number) => points.reduce((total, x) => total + of(x), 0)
  const candidates = rows.filter(({ truth }) => truth === undefined).length
  return decodeWhatIf(
    encodeWhatIf({
      about: {
        rule: { ...MEAN, version: 3 },
        lensShare: 0.1,
        reliabilities: { from: 'fit' },
        gradesSinceRun: null,
        graders: 3,
        leftOut: 0,
        ...about,
      },
      candidates,
      ids: Int32Array.from(rows, (_, at) => at + 11),
      state: Uint8Array.from(rows, ({ state = 'open' }) => code(state)),
      ruled: Uint8Array.from(rows, ({ ruled }) => (ruled ? 1 : 0)),
      truth: Int8Array.from(rows, ({ truth = UNKNOWN_TRUTH }) => truth),
      notSentOn: Uint8Array.from(rows, ({ notSentOn }) => (notSentOn ? 1 : 0)),
      tallies: {
        looks: Uint16Array.from(rows, ({ points }) => points.length),
        grades: Uint16Array.from(rows, ({ points }) => points.length),
        points: Float64Array.from(rows, ({ points }) => sum(points, (x) => x)),
        squaredPoints: Float64Array.from(rows, ({ points }) => sum(points, (x) => x * x)),
        evidence: Float64Array.from(rows, ({ evidence = 0 }) => evidence),
      },
      stampLooks: stampLooksOf(rows),
    }),
  )
}

describe('tryRule', () => {
  it('sets aside what the first pass did not send on, whatever the rule, until a look counts there', () => {
    const columns = columnsFor([
      { points: [], state: 'set aside', notSentOn: true },
      { points: [], state: 'open', notSentOn: true },
      { points: [], state: 'open' },
      { points: [3, 3], evidence: 3, state: 'confirmed', notSentOn: true },
    ])
    const trial = tryRule(columns, MEAN)
    expect(trial.now).toEqual({ open: 2, split: 0, confirmed: 1, 'set aside': 1 })
    expect(trial.then).toEqual({ open: 1, split: 0, confirmed: 1, 'set aside': 2 })
    expect(trial.moves).toEqual([{ from: 'open', to: 'set aside', rows: [1] }])
    expect(trial.dropped).toBe(2)
    // Of what came to the bench, a row without grades (10 % of lenses) and one that the rule confirms.
    const p = columns.probabilities[3]
    expect(trial.promised?.completeness).toBeCloseTo(p / (p + 0.1), 12)
    expect(qualityCurve(columns, MEAN).promised.at(-1)?.completeness).toBeCloseTo(p / (p + 0.1), 12)
  })

  it('counts states now and then, and lists who would move from where to where, the likeliest lens first', () => {
    const columns = columnsFor([
      { points: [3, 3], evidence: 2, state: 'confirmed' },
      { points: [2, 2], evidence: 1, state: 'open' },
      { points: [2, 3], evidence: 5, state: 'open' },
      { points: [0, 0], evidence: -4, state: 'set aside' },
      { points: [0, 0], evidence: -4, state: 'open' },
    ])
    const trial = tryRule(columns, MEAN)
    expect(trial.now).toEqual({ open: 3, split: 0, confirmed: 1, 'set aside': 1 })
    expect(trial.then).toEqual({ open: 0, split: 0, confirmed: 3, 'set aside': 2 })
    expect(trial.moves).toEqual([
      { from: 'open', to: 'confirmed', rows: [2, 1] },
      { from: 'open', to: 'set aside', rows: [4] },
    ])
    expect(trial.changed).toBe(3)
  })

  it('leaves a candidate with a ruling as it is, and says so', () => {
    const trial = tryRule(columnsFor([{ points: [0, 0], state: 'confirmed', ruled: true }]), MEAN)
    expect(trial).toMatchObject({ changed: 0, heldByRuling: 1, then: { confirmed: 1, 'set aside': 0 } })
  })

  it('decides by evidence and Wald’s boundaries under the reliability method', () => {
    // ln(0.95 / 0.001) = 6.857 and ln(0.05 / 0.999) = -2.995: Wald (1947), section 3.2.
    const rule = RuleInput.parse({ method: 'reliability', falseConfirmed: 0.001, missedLens: 0.05, leastGrades: 1 })
    const evidence = [6.86, 6.85, -2.99, -3]
    const trial = tryRule(columnsFor(evidence.map((one) => ({ points: [1], evidence: one }))), rule)
    expect(trial.then).toEqual({ open: 2, split: 0, confirmed: 1, 'set aside': 1 })
  })

  it('measures completeness and purity on calibration stamps that have their looks, and counts none of them as candidates', () => {
    const trial = tryRule(
      columnsFor([
        { points: [3, 3], evidence: 3 },
        { points: [3, 3, 2, 2], truth: LENS },
        { points: [1, 0, 0, 0], truth: LENS },
        { points: [0, 0, 0, 0], truth: NOT_A_LENS },
        { points: [3, 2, 3, 2], truth: NOT_A_LENS },
        { points: [3, 3], truth: LENS },
      ]),
      MEAN,
    )
    expect(trial.then.confirmed).toBe(1)
    expect(trial.stamps.counts).toEqual({ lenses: 2, lensesConfirmed: 1, nonLenses: 2, nonLensesConfirmed: 1 })
    expect(trial.stamps.waiting).toBe(1)
    expect(trial.stamps.quality?.completeness.value).toBe(0.5)
    // Bayes' rule with a share of lenses of 0.1: 0.1 * 0.5 / (0.1 * 0.5 + 0.9 * 0.5).
    expect(trial.stamps.quality?.purity.value).toBeCloseTo(0.1, 12)
  })

  it('stops a stamp where it would stop a candidate, however many looked at the stamp after that', () => {
    // Boundaries 6.857 and -2.995. The third look sets it aside; all twelve together would confirm it: -3.3 + 9 * 1.2 = 7.5.
    const late = [-1.1, -1.1, -1.1, ...Array<number>(9).fill(1.2)]
    const points = late.map((weight) => (weight < 0 ? 1 : 3))
    const rule = RuleInput.parse({ method: 'reliability', gradesWanted: 12, leastGrades: 2 })
    const trial = tryRule(columnsFor([{ points, weights: late, evidence: 7.5, truth: LENS }]), rule)
    expect(trial.stamps.counts).toMatchObject({ lenses: 1, lensesConfirmed: 0 })
    // And the mean of the first four, 1.5 points, stays between, where that of all twelve is 2.5.
    expect(tryRule(columnsFor([{ points, truth: LENS }]), MEAN).stamps.counts).toMatchObject({ lensesConfirmed: 0 })
  })

  it('counts a stamp between the boundaries as waiting while looks are to come, and as not confirmed after the most', () => {
    const between = columnsFor([{ points: [3, 3, 3], weights: [2, 2, 2], evidence: 6, truth: LENS }])
    const rule = (gradesWanted: number) => RuleInput.parse({ method: 'reliability', gradesWanted, leastGrades: 2 })
    expect(tryRule(between, rule(4)).stamps).toMatchObject({ counts: { lenses: 0 }, waiting: 1, quality: null })
    expect(tryRule(between, rule(3)).stamps).toMatchObject({ counts: { lenses: 1, lensesConfirmed: 0 }, waiting: 0 })
  })

  it('promises nothing where no reliabilities are known', () => {
    const trial = tryRule(columnsFor([{ points: [] }], { lensShare: null, reliabilities: null }), MEAN)
    expect(trial).toMatchObject({ promised: null, stamps: { quality: null } })
  })

  it('refuses thresholds that do not fit together, with a sentence', () => {
    const rule: RuleInput = { ...MEAN, method: 'mean', confirmMean: 1, setAsideMean: 2, splitSpread: 1 }
    expect(ruleProblems(rule)).toEqual([expect.stringContaining('must be below')])
    expect(() => tryRule(columnsFor([{ points: [] }]), rule)).toThrow(RangeError)
  })
})

describe('qualityCurve', () => {
  const columns = columnsFor([
    { points: [3, 3], evidence: 4 },
    { points: [2, 2], evidence: 2 },
    { points: [1, 1], evidence: -1 },
    { points: [0, 0], evidence: -5 },
    { points: [3, 3, 3, 3], weights: [2, 2, 2, 2], truth: LENS },
    { points: [2, 2, 3, 3], weights: [1, 1, 2, -1], truth: LENS },
    { points: [3], weights: [8], truth: LENS },
    { points: [0, 0, 0, 0], weights: [-2, -2, 9, 9], truth: NOT_A_LENS },
    { points: [3, 0, 3, 3], weights: [3, -1, 2, 1], truth: NOT_A_LENS },
  ])

  it('agrees with the rule tried at each of its thresholds', () => {
    const { promised } = qualityCurve(columns, MEAN)
    expect(promised.map(({ threshold }) => threshold)).toEqual([3, 2, 1, 0].map((mean) => expect.closeTo(mean, 9)))
    for (const { threshold, completeness, purity, confirmed } of promised.slice(0, 3)) {
      const rule: RuleInput = { ...MEAN, method: 'mean', confirmMean: threshold, setAsideMean: 0, splitSpread: 1 }
      const trial = tryRule(columns, rule)
      expect(trial.then.confirmed).toBe(confirmed)
      expect(trial.promised?.completeness).toBeCloseTo(completeness, 12)
      expect(trial.promised?.purity).toBeCloseTo(purity, 12)
    }
  })

  it('gains completeness and loses purity as the threshold falls', () => {
    const rule = RuleInput.parse({ method: 'reliability', leastGrades: 1 })
    const { promised, stamps } = qualityCurve(columns, rule)
    expect(promised.map(({ completeness }) => completeness)).toEqual(
      promised.map(({ completeness }) => completeness).toSorted((a, b) => a - b),
    )
    expect(promised.map(({ purity }) => purity)).toEqual(promised.map(({ purity }) => purity).toSorted((a, b) => b - a))
    expect(promised.at(-1)).toMatchObject({ completeness: 1, confirmed: 4 })
    expect(stamps.map(({ completeness }) => completeness)).toEqual(
      stamps.map(({ completeness }) => completeness).toSorted((a, b) => a - b),
    )
  })

  it('agrees on stamps with the rule tried at each of its thresholds, those that wait left out alike', () => {
    const missedLens = 0.05
    for (const gradesWanted of [4, 10]) {
      const rule: RuleInput = { method: 'reliability', gradesWanted, leastGrades: 1, falseConfirmed: 1e-9, missedLens }
      const { stamps } = qualityCurve(columns, rule)
      expect(stamps.length).toBeGreaterThan(1)
      for (const { threshold, completeness, purity } of stamps) {
        // Wald's upper boundary solved for the rate; a hair more, for the step of the curve.
        const falseConfirmed = (1 - missedLens) * Math.exp(-threshold) * (1 + 1e-9)
        if (falseConfirmed >= 0.5) continue
        const { quality } = tryRule(columns, { ...rule, falseConfirmed }).stamps
        expect(quality?.completeness.value).toBeCloseTo(completeness, 12)
        expect(quality?.purity.value).toBeCloseTo(purity, 12)
      }
    }
  })
})

describe('the columns as they travel', () => {
  it('come out as they went in, whatever the length of their head', () => {
    for (const graders of [1, 10, 100, 1000, 10_000]) {
      const columns = columnsFor(
        [
          { points: [3, 2, 0], evidence: 0.1, state: 'split' },
          { points: [3, 0, 1], truth: LENS, weights: [0.5, -1.5, 0.25] },
        ],
        {
          graders,
        },
      )
      expect(columns.about.graders).toBe(graders)
      expect(columns.candidates).toBe(1)
      expect([...columns.ids]).toEqual([11, 12])
      expect([...columns.truth]).toEqual([UNKNOWN_TRUTH, LENS])
      expect(columns.tallies.evidence[0]).toBe(0.1)
      expect(columns.tallies.squaredPoints[0]).toBe(13)
      expect(columns.probabilities[1]).toBeCloseTo(0.1, 12)
      expect([...columns.stampLooks.start]).toEqual([0, 3])
      expect([...columns.stampLooks.grade]).toEqual([0, 3, 2])
      expect([...columns.stampLooks.weight]).toEqual([0.5, -1.5, 0.25])
    }
  })

  it('are refused when they did not arrive whole', () => {
    const bytes = encodeWhatIf(columnsFor([{ points: [3] }]))
    for (const length of [0, 3, 100, bytes.length - 1]) {
      expect(() => decodeWhatIf(bytes.slice(0, length))).toThrow(/whole/)
    }
  })
})
