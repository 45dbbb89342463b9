import { render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import { RuleHistory } from './rule-history'

const COMMON = { author: 'avocet', createdAt: '2026-12-01T12:00:00.000Z', leastGrades: 2 }
const MEAN = {
  ...COMMON,
  method: 'mean' as const,
  id: 1,
  version: 1,
  gradesWanted: 6,
  confirmMean: 2,
  setAsideMean: 1,
  splitSpread: 0.9,
}
const RELIABILITY = {
  ...COMMON,
  method: 'reliability' as const,
  id: 2,
  version: 2,
  gradesWanted: 10,
  mostLooks: 10,
  falseConfirmed: 0.001,
  missedLens: 0.05,
}
const cells = (row: number) => [...screen.getAllByRole('row')[row].children].map((cell) => cell.textContent)

it('shows versions of both methods, each with what decides by it, and what a version changed', () => {
  render(<RuleHistory versions={[RELIABILITY, MEAN]} />)
  expect(cells(1).slice(1, 5)).toEqual([
    'reliability (changed)',
    '10 (changed)',
    '2',
    'false confirmed 0.001 (changed)missed lenses 0.05 (changed)',
  ])
  expect(cells(2).slice(1, 5)).toEqual(['mean', '6', '2', 'confirm ≥ 2set aside ≤ 1spread > 0.9'])
})
