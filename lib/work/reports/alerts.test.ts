import { describe, expect, it } from 'vitest'
import { raiseAlerts, type AlertInput } from './alerts'
import type { GraderReport } from './report-types'

const share = (value: number, low: number, high: number) => ({ value, interval: { low, high } })

const person: GraderReport = {
  grades: 200,
  cannotJudge: 0,
  calibrationGrades: 40,
  medianSeconds: 3,
  lensesSeen: share(0.9, 0.8, 0.95),
  nonLensesSeen: share(0.9, 0.8, 0.95),
  lenses: 10,
  nonLenses: 190,
  bitsPerLook: 0.1,
  letters: [10, 20, 70, 100].map((given, at) => ({ grade: (['A', 'B', 'C', 'N'] as const)[at], given, weight: 0 })),
  consistency: null,
  quickStretch: null,
  drift: { size: 40, windows: [], change: null },
}

/** Three graders who share 100 candidates each and agree alike: nothing to raise. */
function calm(change: Partial<AlertInput> = {}): AlertInput {
  const pair = { plain: 0.5, sameGrade: 0.7, reason: null, quadraticInterval: null, shared: 100, quadratic: 0.7 }
  return {
    campaign: {
      coefficients: [{ key: 'alpha', name: 'alpha', value: 0.75, interval: { low: 0.7, high: 0.8 }, note: '' }],
      percentAgreement: 0.7,
      candidates: 100,
      resamples: 1000,
    },
    pairs: [
      { ...pair, first: 0, second: 1 },
      { ...pair, first: 0, second: 2 },
      { ...pair, first: 1, second: 2 },
    ],
    people: [person, person, person],
    calibration: {
      stamps: 40,
      lensStamps: 20,
      graded: 40,
      prior: 0.5,
      bins: [],
      brierScore: 0.1,
      baseBrierScore: 0.25,
      expectedCalibrationError: 0.05,
    },
    tables: { graders: 3, counts: new Uint32Array(48).map((_, at) => (at % 16 === 15 ? 50 : at % 16 === 10 ? 50 : 0)) },
    isOut: [false, false, false],
    personIds: [1, 2, 3],
    held: [],
    now: Date.parse('2026-03-01T12:00:00.000Z'),
    ...change,
  }
}

const keys = (input: AlertInput) => raiseAlerts(input).map(({ key, grader }) => `${key}:${grader}`)
const peopleWith = (change: Partial<GraderReport>) => [person, { ...person, ...change }, person]

describe('alerts', () => {
  it('are none where nothing stands out', () => {
    expect(keys(calm())).toEqual([])
  })

  it('say that alpha is low, with its interval, and not over a few candidates', () => {
    const { campaign } = calm()
    const low = {
      ...campaign,
      coefficients: [{ ...campaign.coefficients[0], value: 0.5, interval: { low: 0.4, high: 0.6 } }],
    }
    const [alert] = raiseAlerts(calm({ campaign: low }))
    expect(alert).toMatchObject({ key: 'alpha-low', grader: null })
    expect(alert.because).toContain('0.50 (95 % interval 0.40 to 0.60) over 100 candidates')
    expect(keys(calm({ campaign: { ...low, candidates: 29 } }))).toEqual([])
  })

  it('say that calibration stamps of one kind are few', () => {
    const { calibration } = calm()
    expect(keys(calm({ calibration: { ...calibration, stamps: 39, lensStamps: 19 } }))).toEqual(['few-stamps:null'])
    expect(keys(calm({ calibration: { ...calibration, stamps: 39, lensStamps: 20 } }))).toEqual(['few-stamps:null'])
  })

  it('say that one grades differently from the others, with both numbers, and nothing about two people', () => {
    const { pairs } = calm()
    const far = pairs.map((pair) => (pair.first === 0 && pair.second === 1 ? pair : { ...pair, quadratic: 0.1 }))
    // By hand: the third has a mean of 0.1, the others (0.7 + 0.1) / 2 = 0.4.
    const [alert] = raiseAlerts(calm({ pairs: far }))
    expect(alert).toMatchObject({ key: 'far-from-others', grader: 2 })
    expect(alert.because).toContain('0.10, over 200 pairs of grades; half of the others have 0.40')
    const few = far.map((pair) => ({ ...pair, shared: 30 }))
    expect(keys(calm({ pairs: few }))).toEqual([])
    expect(keys(calm({ pairs: far, isOut: [false, true, false] }))).toEqual([])
  })

  it('say that one nearly always gives the same letter only where the others gave it to the same candidates less often', () => {
    const letters = person.letters.map((letter) => ({ ...letter, given: letter.grade === 'N' ? 196 : 1 }))
    const [alert] = raiseAlerts(calm({ people: peopleWith({ letters }) }))
    expect(alert).toMatchObject({ key: 'same-grade', grader: 1 })
    expect(alert.because).toContain('196 of 200 grades (98 %) are N; the others gave N to the same candidates in 50 %')
    const allN = { graders: 3, counts: new Uint32Array(48).map((_, at) => (at % 16 === 15 ? 100 : 0)) }
    expect(keys(calm({ people: peopleWith({ letters }), tables: allN }))).toEqual([])
    expect(keys(calm({ people: peopleWith({ letters, grades: 49 }) }))).toEqual([])
  })

  it('tell a very quick stretch with its place and pace', () => {
    const quickStretch = { from: 26, to: 55, at: Date.parse('2026-02-01'), medianSeconds: 0.4 }
    const [alert] = raiseAlerts(calm({ people: peopleWith({ quickStretch }) }))
    expect(alert.because).toContain('30 looks in a row (their 26th to 55th, from 2026-02-01) took 0.4 s')
  })

  it('tell a drift of a tenth or more with both intervals, and no smaller one', () => {
    const change = { what: 'lenses' as const, before: share(0.9, 0.85, 0.95), after: share(0.6, 0.5, 0.7) }
    const [alert] = raiseAlerts(calm({ people: peopleWith({ drift: { size: 40, windows: [], change } }) }))
    expect(alert.because).toContain('A or B to 90 % (85 % to 95 %) of lenses in the first third')
    const small = { ...change, after: share(0.82, 0.8, 0.84) }
    expect(keys(calm({ people: peopleWith({ drift: { size: 40, windows: [], change: small } }) }))).toEqual([])
  })

  it('tell who holds candidates at an open bench without grading for two hours', () => {
    const held = [{ personId: 2, candidates: 5, lastGradeAt: '2026-03-01T09:30:00.000Z' }]
    const [alert] = raiseAlerts(calm({ held }))
    expect(alert).toMatchObject({ key: 'held', grader: 1 })
    expect(alert.because).toContain('5 candidates at an open bench and last graded 2 hours ago')
    expect(keys(calm({ held: [{ ...held[0], lastGradeAt: '2026-03-01T10:30:00.000Z' }] }))).toEqual([])
  })

  it('are not raised of who is left out', () => {
    const quickStretch = { from: 26, to: 55, at: 0, medianSeconds: 0.4 }
    expect(keys(calm({ people: peopleWith({ quickStretch }), isOut: [false, true, false] }))).toEqual([])
  })
})
