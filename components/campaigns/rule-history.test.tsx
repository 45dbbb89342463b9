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

it('shows versions of both methods, with a dash for what a method does not have', () => {
  render(<RuleHistory versions={[RELIABILITY, MEAN]} />)
  expect(cells(1).slice(1, 9)).toEqual([
    'reliability (changed)',
    '10 (changed)',
    '2',
    '–',
    '–',
    '–',
    '0.001 (changed)',
    '0.05 (changed)',
  ])
  expect(cells(2).slice(1, 9)).toEqual(['mean', '6', '2', '2', '1', '0.9', '–', '–'])
})

it('leaves out the columns of a method that no version has', () => {
  render(<RuleHistory versions={[MEAN]} />)
  expect(screen.queryByText('missed lenses')).toBeNull()
  expect(screen.getByText('spread >')).toBeVisible()
})
