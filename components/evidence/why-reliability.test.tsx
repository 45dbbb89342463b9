import { render, screen, within } from '@testing-library/react'
import { describe, expect, it } from 'vitest'
import type { EvidenceVerdict } from '@/lib/work/rulings/candidate-evidence'
import type { ReliabilityWhy } from '@/lib/work/rulings/explain-reliability'
import { lineScale, ticksOf } from './odds-scale'
import { WhyReliability } from './why-reliability'

const step = (label: string, grade: 'A' | 'N', weight: number, from: number, own = false) => ({
  label,
  grade,
  own,
  words: 'strongly for a lens',
  factor: 'odds times 30',
  weight,
  from,
  to: from + weight,
})
const START = Math.log(0.02 / 0.98)
const WHY: ReliabilityWhy = {
  outcome: 'split',
  prior: 0.02,
  steps: [step('curlew', 'A', 3.4, START), step('dunlin', 'N', -1.2, START + 3.4, true)],
  rates: [{ by: 'curlew', grade: 'A', ofLenses: 0.6, ofOthers: 0.02, learnedFrom: 240, calibration: 30 }],
  evidence: 2.2,
  logOdds: START + 2.2,
  probability: 0.156,
  confirm: { probability: 0.951, logOdds: 2.97 },
  setAside: { probability: 0.001, logOdds: -6.9 },
  cannotJudge: 1,
  leftOut: ['ruff'],
  changes: ['Without the N of dunlin it would be confirmed (0.97).'],
  since: { newGrades: 1, newRun: false, probability: 0.93, outcome: 'open' },
}
const VERDICT = {
  id: 1,
  outcome: 'split',
  grades: 2,
  cannotJudge: 1,
  mean: 1.5,
  spread: 1.5,
  probability: 0.156,
  reason: 'Split.',
  rule: {
    method: 'reliability',
    id: 1,
    version: 3,
    gradesWanted: 10,
    mostLooks: 10,
    leastGrades: 2,
    falseConfirmed: 0.001,
    missedLens: 0.05,
  },
  at: '2026-12-01T12:00:00.000Z',
} satisfies EvidenceVerdict

describe('why a verdict by reliability is as it is', () => {
  it('is a table that adds up: the prior, each grade with words and weight, and the sum', () => {
    render(<WhyReliability why={WHY} verdict={VERDICT} />)
    const rows = within(screen.getByRole('table')).getAllByRole('rowheader')
    expect(rows.map((row) => row.textContent)).toEqual([
      'Before any gradeshare of lenses 0.0200',
      'Acurlewstrongly for a lens: odds times 30',
      'Ndunlin (you)strongly for a lens: odds times 30',
      'Togetherprobability of a lens 0.156',
    ])
    const figures = screen.getAllByRole('row').map((row) => row.lastElementChild?.textContent)
    // ln(0.02 / 0.98) = -3.89; -3.89 + 3.40 - 1.20 = -1.69.
    expect(figures.slice(1)).toEqual(['−3.89', '+3.40', '−1.20', '−1.69'])
  })

  it('names the boundaries with the version of the rule, who is left out, and what would have changed it', () => {
    render(<WhyReliability why={WHY} verdict={VERDICT} />)
    expect(screen.getByText(/The rule \(version 3\)/)).toHaveTextContent(
      'confirms from a probability of 0.9510 (log odds +2.97) and sets aside down to 0.00100 (−6.90), after 2 grades at least and 10 looks at most. 1 look could not judge, which adds nothing. Left out of the consensus, so that nothing of theirs counts: ruff.',
    )
    expect(screen.getByText('Without the N of dunlin it would be confirmed (0.97).')).toBeVisible()
  })

  it('tells shares with digits enough that their logarithm is the weight', () => {
    const rates = [
      { by: 'curlew', grade: 'C' as const, ofLenses: 0.0958, ofOthers: 0.1946, learnedFrom: 240, calibration: 30 },
    ]
    render(<WhyReliability why={{ ...WHY, rates }} verdict={VERDICT} />)
    // ln(0.0958 / 0.195) = -0.71
    expect(screen.getByText(/gives C to/)).toHaveTextContent(
      'gives C to 9.58 % of lenses and to 19.5 % of what is none',
    )
  })

  it('tells what came since apart from the verdict', () => {
    render(<WhyReliability why={WHY} verdict={VERDICT} />)
    expect(screen.getByText(/Since then/)).toHaveTextContent(
      'Since then 1 more grade: 0.93 (open, if a run took it in now). The verdict above stands until then.',
    )
  })
})

describe('the drawn line', () => {
  it('holds everything that is shown, with less probable to the left', () => {
    const scale = lineScale(WHY)
    const shown = [WHY.setAside.logOdds, START, WHY.logOdds, START + 3.4, WHY.confirm.logOdds].map(scale)
    expect(shown).toEqual([...shown].sort((a, b) => a - b))
    expect(Math.min(...shown)).toBeGreaterThan(0)
    expect(Math.max(...shown)).toBeLessThan(1)
  })

  it('has ticks at round probabilities that do not run into each other', () => {
    const scale = lineScale(WHY)
    expect(ticksOf(scale)).toEqual([0.001, 0.01, 0.1, 0.5, 0.9])
  })
})
