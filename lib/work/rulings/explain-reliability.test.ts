import { describe, expect, it } from 'vitest'
import type { Answer } from '@/lib/science/agreement/grades'
import { explainReliability, type WeighedBy } from './explain-reliability'
import { verdictChanges } from './verdict-changes'

// Ratios of likelihoods that can be done in the head: A 8, B 2, C 1/2, N 1/8.
const RATES = { lens: [0.4, 0.4, 0.15, 0.05], notLens: [0.05, 0.2, 0.3, 0.4] }
const answer = (grade: Answer, by: string, more: Partial<WeighedBy> = {}): WeighedBy => ({
  by,
  own: false,
  grade,
  rates: RATES,
  learnedFrom: 120,
  calibration: 20,
  leftOut: false,
  ...more,
})
// A share of 0.2 is odds of 1/4. Boundaries: (1 - 0.1) / 0.01 = 90 up, 0.1 / 0.99 = 0.101 down; as odds 22.5 and 0.02525.
const RULE = { falseConfirmed: 0.01, missedLens: 0.1, leastGrades: 2, mostLooks: 6 }
const explain = (answers: WeighedBy[], onlyOwn = false) =>
  explainReliability({ rule: RULE, answers, lensShare: 0.2 }, { onlyOwn })

describe('a verdict by reliability as a sum', () => {
  it('starts at the prior, goes a step a grade and ends at the probability that decides', () => {
    const why = explain([answer('C', 'plover'), answer('A', 'curlew'), answer('A', 'dunlin'), answer('U', 'ruff')])
    expect(why.steps.map(({ label, grade }) => `${grade} ${label}`)).toEqual(['A curlew', 'A dunlin', 'C plover'])
    const odds = [why.steps[0].from, ...why.steps.map(({ to }) => to)].map(Math.exp)
    for (const [index, expected] of [1 / 4, 2, 16, 8].entries()) expect(odds[index]).toBeCloseTo(expected, 10)
    expect(Math.exp(why.logOdds)).toBeCloseTo(8, 10)
    expect(Math.exp(why.evidence)).toBeCloseTo(32, 10)
    expect(why.probability).toBeCloseTo(8 / 9, 10)
    expect(why.confirm.probability).toBeCloseTo(22.5 / 23.5, 10)
    expect(why.setAside.probability).toBeCloseTo(0.1 / 0.99 / 4 / (1 + 0.1 / 0.99 / 4), 10)
    expect(why.steps[0]).toMatchObject({ words: 'clearly for a lens', factor: 'odds times 8.0' })
    expect(why).toMatchObject({ outcome: 'open', cannotJudge: 1, leftOut: [] })
  })

  it('counts nothing of somebody who is left out, and names them', () => {
    const why = explain([answer('A', 'curlew'), answer('A', 'dunlin'), answer('N', 'plover', { leftOut: true })])
    expect(Math.exp(why.logOdds)).toBeCloseTo(16, 10)
    expect(why.leftOut).toEqual(['plover'])
    expect(why.steps).toHaveLength(2)
  })

  it('tells a grader their own numbers, and those of the others in one step only', () => {
    const answers = [answer('A', 'G02'), answer('B', 'G03', { own: true }), answer('N', 'G04')]
    const why = explain(answers, true)
    expect(why.steps.map(({ label, own }) => [label, own])).toEqual([
      ['G03', true],
      ['The other 2 grades together', false],
    ])
    expect(Math.exp(why.steps[1].weight)).toBeCloseTo(1, 10)
    expect(Math.exp(why.steps[1].to)).toBeCloseTo(1 / 2, 10)
    expect(why.rates.map(({ by }) => by)).toEqual(['G03'])
    expect(JSON.stringify(why)).not.toMatch(/G02|G04/)
  })

  it('tells a grader of themselves only that they are left out', () => {
    const answers = [answer('A', 'G02', { leftOut: true }), answer('B', 'G03', { own: true, leftOut: true })]
    expect(explain([...answers, answer('N', 'G04'), answer('N', 'G05')], true).leftOut).toEqual(['G03'])
    expect(JSON.stringify(explain([answers[0], answer('A', 'G03', { own: true })], true))).not.toContain('G02')
  })

  it('says from what share of lenses and of others a weight comes', () => {
    expect(explain([answer('A', 'curlew')]).rates).toEqual([
      { by: 'curlew', grade: 'A', ofLenses: 0.4, ofOthers: 0.05, learnedFrom: 120, calibration: 20 },
    ])
  })
})

describe('what would have changed it', () => {
  const changes = (letters: string, mayTell?: (at: number) => boolean) => {
    const graders = ['curlew', 'dunlin', 'plover', 'ruff', 'knot']
    const answers = [...letters].map((grade, at) => ({ grade: grade as Answer, grader: graders[at], rates: RATES }))
    return verdictChanges({ rule: RULE, answers, lensShare: 0.2 }, RATES, mayTell)
  }

  it('of a confirmed one: the grade without which it would not be, other grades, one more, and the strictest rule', () => {
    // A, A, A: odds 128. Without an A 16, below 22.5: open. One more N: 16: open. Evidence 512: alpha = 0.9 / 512.
    expect(changes('AAA')).toEqual([
      'Without the A of curlew it would be open (0.94).',
      'Had curlew, dunlin or plover given C or N instead of A, it would be open.',
      'One more grade of somebody new would make it open with N (0.94).',
      'With the other error rate as it is, these grades would be confirmed by any rule that lets at least 0.0018 of what is no lens be confirmed (this one 0.01).',
    ])
  })

  it('counts the fewest grades that it takes', () => {
    // Five A: odds 8192; without two 128, without three 16.
    expect(changes('AAAAA')[0]).toBe(
      'It takes 3 grades left out, the A of curlew, the A of dunlin and the A of plover: without them it would be open (0.94).',
    )
  })

  it('of one in between: which rules would decide it', () => {
    // A, A, C: evidence 32: alpha = 0.9 / 32 = 0.0281, rounded up; beta would be above 1.
    expect(changes('AAC').at(-1)).toBe(
      'With the other error rate as it is, these grades would be confirmed by any rule that lets at least 0.029 of what is no lens be confirmed (this one 0.01).',
    )
  })

  it('names no error rates where the least number of grades is what keeps a verdict open', () => {
    // Three A under a rule that asks for four grades: the evidence of 512 is past the boundary of 90 and decides nothing.
    const rule = { ...RULE, leastGrades: 4 }
    const answers = [...'AAAU'].map((grade) => ({ grade: grade as Answer, grader: 'curlew', rates: RATES }))
    expect(verdictChanges({ rule, answers, lensShare: 0.2 }, RATES).at(-1)).toBe(
      'Without 1 more grade no error rates would decide it: the rule asks for at least 4.',
    )
    expect(changes('').join(' ')).not.toContain('any rule')
  })

  it('names no error rate that would make no rule with the other one', () => {
    // A, N: evidence 8 * 0.125 = 1: alpha = 1 - beta and beta = 1 - alpha, which sum to 1 with the other.
    expect(changes('AN').join(' ')).not.toContain('any rule')
  })

  it('tells a probability from the boundary that it does not reach', () => {
    // Confirmed from 22.5 / 23.5 = 0.9574. Odds 128, and one more N of 0.175: 22.4, 0.9573.
    const close = { lens: [0.4, 0.4, 0.15, 0.07], notLens: [0.05, 0.2, 0.3, 0.4] }
    const answers = ['A', 'A', 'A'].map((grade) => ({ grade: grade as Answer, grader: 'ruff', rates: RATES }))
    const sentences = verdictChanges({ rule: RULE, answers, lensShare: 0.2 }, close)
    expect(sentences).toContain('One more grade of somebody new would make it open with N (0.9573).')
  })

  it('keeps to the own grade of a reader who may learn no other weight', () => {
    const sentences = changes('AAA', (at) => at === 1)
    expect(sentences.join(' ')).toContain('Had dunlin given')
    expect(sentences.join(' ')).not.toMatch(/curlew|plover/)
  })
})
