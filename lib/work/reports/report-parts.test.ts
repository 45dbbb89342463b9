import { describe, expect, it } from 'vitest'
import { readFixture } from '@/lib/science/agreement/_fixtures'
import { jeffreysInterval } from '@/lib/science/agreement/binomial-intervals'
import type { Answer } from '@/lib/science/agreement/grades'
import { SeededRandom } from '@/lib/science/lensing/seeded-random'
import { sheetOf, type SheetAnswer } from './_sheet'
import { measureCalibration } from './calibration-report'
import { judgedGrades, measureDrift } from './drift'
import { countPerDay } from './grades-per-day'
import { medianOf } from './grader-report'
import { fitLenses } from './lens-fit'
import { findQuickStretch } from './quick-stretch'
import { measureScore } from './score-report'
import { estimateTwoRates, shareOfEffective, type JudgedGrade } from './two-rates'
import { nearnessOfGraders } from './typical-agreement'

const candidate = { id: 1, truth: null, imaged: 1, settled: 0, given: 0, asked: 0, ruled: 0, pass: 'sent on' } as const

describe('the score of the machine search against the verdict', () => {
  it('has the area and the points of the reference', () => {
    // fixtures/agreement/roc-calibration.json: 20 scores and truths by scikit-learn 1.2.1, area 0.725.
    const { label, score, auc, roc_points: points } = readFixture('roc-calibration.json')
    const found = measureScore(
      label.map((isLens, at) => ({ ...candidate, score: score[at], state: isLens ? 'confirmed' : 'set aside' })),
    )
    expect(found?.area).toBeCloseTo(auc, 12)
    expect(found?.points.map(({ falsePositiveRate }) => falsePositiveRate)).toEqual(points.fpr)
    expect(found?.points[0].threshold).toBeNull()
  })

  it('leaves out the undecided, calibration stamps and candidates without a score, and counts them', () => {
    const found = measureScore([
      { ...candidate, score: 0.9, state: 'confirmed' },
      { ...candidate, score: 0.1, state: 'set aside' },
      { ...candidate, score: 0.2, state: 'split' },
      { ...candidate, score: 0.2, state: 'open' },
      { ...candidate, score: null, state: 'set aside' },
      { ...candidate, score: 0.99, state: 'open', truth: 'not a lens' },
    ])
    expect(found).toMatchObject({ confirmed: 1, setAside: 1, undecided: 2, withoutScore: 1, area: 1 })
    expect(measureScore([{ ...candidate, score: 0.9, state: 'confirmed' }])).toBeNull()
  })

  it('keeps both ends and at most some two hundred points of a long curve', () => {
    const many = Array.from({ length: 5000 }, (_, at) => ({
      ...candidate,
      score: ((at * 7919) % 5000) / 5000,
      state: at % 3 === 0 ? ('confirmed' as const) : ('set aside' as const),
    }))
    const points = measureScore(many)!.points
    expect(points.length).toBeGreaterThan(100)
    expect(points.length).toBeLessThanOrEqual(202)
    expect(points[0]).toMatchObject({ falsePositiveRate: 0, truePositiveRate: 0 })
    expect(points.at(-1)).toMatchObject({ falsePositiveRate: 1, truePositiveRate: 1 })
  })
})

describe('calibration', () => {
  const stamps = (grades: string, truth: readonly number[]) => {
    const answers = [...grades].map((grade, at) => ({ candidate: at, grade: grade as 'A' }))
    const sheet = sheetOf(answers, 1, truth)
    for (const [at, one] of sheet.candidates.entries()) {
      sheet.candidates[at] = { ...one, truth: truth[at] === 0 ? 'lens' : truth[at] === 1 ? 'not a lens' : null }
    }
    return sheet
  }

  it('judges each stamp by what the others taught, from the share of lenses among the stamps', async () => {
    const sheet = stamps('AN', [0, 1])
    const found = measureCalibration(sheet, await fitLenses(sheet, new Set(), null), [false])
    // By hand: without itself the first stamp's A has the rates (5 - 1)/(11 - 1) = 0.4 for a lens and 0.5/11 for the other,
    // whose own N stays; odds 8.8. The second stamp's N has 1/11 and (7 - 1)/(11 - 1) = 0.6; odds 5/33.
    const [first, second] = [8.8 / 9.8, 5 / 33 / (1 + 5 / 33)]
    expect(found.prior).toBe(0.5)
    expect(found.brierScore).toBeCloseTo(((1 - first) ** 2 + second ** 2) / 2, 12)
    expect(found.baseBrierScore).toBe(0.25)
    expect(found.bins).toHaveLength(5)
    expect(found.bins[4]).toMatchObject({ count: 1, lenses: 1 })
  })

  it('has no curve without stamps of both kinds, and none for a stamp that only a grader left out has graded', async () => {
    const lensesOnly = stamps('AAN', [0, 0, -1])
    const fit = await fitLenses(lensesOnly, new Set(), null)
    expect(measureCalibration(lensesOnly, fit, [false])).toMatchObject({
      stamps: 2,
      graded: 2,
      bins: [],
      brierScore: null,
    })
    const both = stamps('AN', [0, 1])
    const without = await fitLenses(both, new Set([1]), null)
    expect(measureCalibration(both, without, [true])).toMatchObject({ stamps: 2, graded: 0, bins: [] })
  })
})

describe('drift', () => {
  const judged = (letters: string, isLens: (at: number) => boolean): JudgedGrade[] =>
    [...letters].map((letter, at) => ({ at, saysLens: letter === 'y', probability: isLens(at) ? 1 : 0 }))

  it('has windows of an eighth of the grades, each half over the one before, the last to the end', () => {
    const found = measureDrift(judged('n'.repeat(400), () => false))
    expect(found.size).toBe(50)
    expect(found.windows[0]).toMatchObject({ from: 1, to: 50, lensesSeen: null, nonLensesSeen: { value: 1 } })
    expect(found.windows[1]).toMatchObject({ from: 26, to: 75 })
    expect(found.windows.at(-1)?.to).toBe(400)
    expect(found.change).toBeNull()
    expect(measureDrift(judged('n'.repeat(39), () => false)).windows).toEqual([])
  })

  it('tells a change between the first and the last third where the intervals do not overlap', () => {
    const letters = 'n'.repeat(100) + 'n'.repeat(100) + 'yn'.repeat(50)
    const found = measureDrift(judged(letters, () => false))
    // By hand: 100 of 100 against 50 of 100 non-lenses got C or N.
    expect(found.change).toMatchObject({ what: 'what is no lens', before: { value: 1 }, after: { value: 0.5 } })
  })

  it('has Jeffreys’ own interval and the plain shares where the truth is known', () => {
    // 7 of 20 lenses and 30 of 40 others.
    const answers = [7, 13].flatMap((count, side) => Array<boolean>(count).fill(side === 0))
    const others = [10, 30].flatMap((count, side) => Array<boolean>(count).fill(side === 0))
    const found = estimateTwoRates([
      ...answers.map((saysLens) => ({ at: 0, saysLens, probability: 1 })),
      ...others.map((saysLens) => ({ at: 0, saysLens, probability: 0 })),
    ])
    expect(found.seen).toBeCloseTo(7 / 20, 12)
    expect(found.passed).toBeCloseTo(30 / 40, 12)
    expect(found.lenses).toBeCloseTo(20, 9)
    expect(found.others).toBeCloseTo(40, 9)
    const { interval } = shareOfEffective(7 / 20, 20)
    expect(interval.low).toBeCloseTo(jeffreysInterval(7, 20)!.low, 10)
    expect(interval.high).toBeCloseTo(jeffreysInterval(7, 20)!.high, 10)
  })

  it('is not pulled by vague probabilities: grades as the rates make them give the rates back', () => {
    // P(says lens) = p s + (1 - p)(1 - t) with s = 0.9, t = 0.8: 0.27 at p = 0.1 and 0.69 at p = 0.7, of 1000 each.
    const group = (probability: number, saying: number) =>
      Array.from({ length: 1000 }, (_, at) => ({ at, saysLens: at < saying, probability }))
    const found = estimateTwoRates([...group(0.1, 270), ...group(0.7, 690)])
    expect(found.seen).toBeCloseTo(0.9, 2)
    expect(found.passed).toBeCloseTo(0.8, 2)
    expect(found.lenses).toBeLessThan(800)
    expect(found.lenses).toBeGreaterThan(50)
  })

  it('is worth nothing where the others tell nothing', () => {
    const found = estimateTwoRates(
      Array.from({ length: 100 }, (_, at) => ({ at, saysLens: at < 50, probability: 0.3 })),
    )
    expect(found.lenses).toBeCloseTo(0, 6)
    expect(found.others).toBeCloseTo(0, 6)
  })

  it('tells no change of a constant person while the others give fewer and fewer looks', async () => {
    // 30 % lenses; three others of known skill look at every candidate of the first third, one of them at those of the last.
    const random = new SeededRandom(3)
    const draw = (lens: boolean, right: number): Answer => (random.chance(right) === lens ? 'B' : 'N')
    const answers: SheetAnswer[] = []
    const isLens = Array.from({ length: 900 }, () => random.chance(0.3))
    for (const [at, lens] of isLens.entries()) answers.push({ grader: 0, candidate: at, grade: draw(lens, 0.85) })
    for (const other of [1, 2, 3]) {
      for (const [at, lens] of isLens.entries()) {
        if (at < 300 || other === 1) answers.push({ grader: other, candidate: at, grade: draw(lens, 0.8) })
      }
    }
    const sheet = sheetOf(answers, 4)
    const judged = judgedGrades(sheet, await fitLenses(sheet, new Set(), null), 0, false, { from: 0, to: 900 })
    expect(measureDrift(judged).change).toBeNull()
    const said = (from: number, to: number) => {
      const some = judged.slice(from, to)
      const sum = (weigh: (one: JudgedGrade) => number) => some.reduce((total, one) => total + weigh(one), 0)
      return sum(({ saysLens, probability }) => (saysLens ? probability : 0)) / sum(({ probability }) => probability)
    }
    // Weighing by probability alone would have it that they had changed.
    expect(said(0, 300) - said(600, 900)).toBeGreaterThan(0.1)
  })
})

describe('grades per day', () => {
  const DAY = 86_400_000

  it('counts looks by letter and person, corrections not, and has quiet days', () => {
    const start = Date.parse('2026-03-01T23:00:00.000Z')
    const found = countPerDay(
      sheetOf(
        [
          { grade: 'A', at: start },
          { grade: 'N', at: start, isLook: false },
          { grade: 'U', at: start + 2 * DAY, grader: 1 },
        ],
        2,
      ),
    )
    expect(found).toEqual({
      binDays: 1,
      bins: [
        { day: '2026-03-01', byLetter: [1, 0, 0, 0, 0], byGrader: [1, 0] },
        { day: '2026-03-02', byLetter: [0, 0, 0, 0, 0], byGrader: [0, 0] },
        { day: '2026-03-03', byLetter: [0, 0, 0, 0, 1], byGrader: [0, 1] },
      ],
    })
  })

  it('tells a long campaign by weeks, without losing a look', () => {
    const found = countPerDay(sheetOf(Array.from({ length: 100 }, (_, day) => ({ at: day * DAY }))))
    expect(found.binDays).toBe(7)
    expect(found.bins.reduce((sum, { byGrader }) => sum + byGrader[0], 0)).toBe(100)
  })
})

describe('a very quick stretch', () => {
  const times = (seconds: readonly (number | undefined)[]) => sheetOf(seconds.map((one) => ({ seconds: one })))
  const slow = Array<number>(30).fill(3)

  it('is found where 15 of 20 looks in a row took less than a second', () => {
    const quick = Array<number>(20).fill(0.5)
    const sheet = times([...slow, ...quick, ...slow])
    // By hand: windows ending from the 15th quick look to five looks after the last one.
    expect(findQuickStretch(sheet, 0, sheet.answers)).toMatchObject({ from: 26, to: 55, medianSeconds: 0.5 })
  })

  it('is none with 14 of 20, with slow looks, or where no time was told', () => {
    const sheet = times([...slow, ...Array<number>(14).fill(0.5), ...slow])
    expect(findQuickStretch(sheet, 0, sheet.answers)).toBeNull()
    const untold = times(Array<undefined>(60).fill(undefined))
    expect(findQuickStretch(untold, 0, 60)).toBeNull()
  })
})

describe('small measures', () => {
  it('takes the median between the two middle values of an even number', () => {
    expect(medianOf([4, 1, 3])).toBe(3)
    expect(medianOf([4, 1, 3, 2])).toBe(2.5)
    expect(medianOf([])).toBeNull()
  })

  it('weighs the nearness of graders by what each pair shares', () => {
    const pair = { plain: null, sameGrade: null, reason: null, quadraticInterval: null }
    const found = nearnessOfGraders(
      [
        { ...pair, first: 0, second: 1, shared: 30, quadratic: 0.8 },
        { ...pair, first: 0, second: 2, shared: 10, quadratic: 0.4 },
        { ...pair, first: 1, second: 2, shared: 10, quadratic: null },
      ],
      4,
    )
    expect(found[0].kappa).toBeCloseTo(0.7, 12)
    expect(found[2]).toEqual({ kappa: 0.4, shared: 10 })
    expect(found[3]).toEqual({ kappa: null, shared: 0 })
  })
})
