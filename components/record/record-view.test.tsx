import { render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import { confusionOf, LETTERS } from '@/lib/work/calibration/confusion'
import type { GraderRecord } from '@/lib/work/calibration/grader-record'
import { selfConsistency } from '@/lib/work/calibration/self-consistency'
import { RecordView } from './record-view'

const record = (change: Partial<GraderRecord> = {}): GraderRecord => ({
  person: { id: 4, name: 'curlew' },
  grades: LETTERS.map((letter, k) => ({ letter, n: 10 * k })),
  looks: 100,
  late: 0,
  days: [{ day: '2026-03-02', n: 60 }],
  medianSeconds: 6.25,
  consistency: selfConsistency([
    { first: 'A', again: 'A' },
    { first: 'A', again: 'B' },
  ]),
  calibration: confusionOf([{ truth: 'lens', grade: 'A', n: 5 }]),
  notYet: false,
  practice: null,
  ...change,
})

it('a grader reads counts, pace, self-consistency and calibration with intervals, and their practice', () => {
  const practice = confusionOf([{ truth: 'not a lens', grade: 'N', n: 3 }])
  render(<RecordView slug="north" record={record({ practice })} own graders={null} />)
  expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('You have graded 100 candidates')
  expect(screen.getByText('6.3 s')).toBeInTheDocument()
  expect(screen.getByText('1 of 2, 50 % (9 % to 91 %)')).toBeInTheDocument()
  expect(screen.getByText('5 of 5, 100 % (57 % to 100 %)')).toBeInTheDocument()
  expect(screen.getByText('3 answers in practice')).toBeInTheDocument()
  expect(screen.queryByText('Everybody who grades')).toBeNull()
})

it('a lead reads that of another, without practice, and goes on to everybody’s', () => {
  const graders = [
    { id: 4, name: 'curlew', ended: 0 as const },
    { id: 5, name: 'dunlin', ended: 1 as const },
  ]
  render(<RecordView slug="north" record={record()} own={false} graders={graders} />)
  expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('curlew has graded 100 candidates')
  expect(screen.queryByRole('heading', { name: 'Practice' })).toBeNull()
  expect(screen.getByRole('link', { name: 'curlew' })).toHaveAttribute('aria-current', 'page')
  expect(screen.getByRole('link', { name: 'dunlin (left)' })).toHaveAttribute('href', '/campaigns/north/people/5')
})

it('says what is still to come where there is nothing', () => {
  const empty = {
    looks: 0,
    days: [],
    medianSeconds: null,
    consistency: selfConsistency([]),
    calibration: confusionOf([]),
    notYet: true,
  }
  render(<RecordView slug="north" record={record(empty)} own graders={null} />)
  expect(screen.getByText('Nothing graded yet')).toBeInTheDocument()
  expect(screen.getByText('No candidate has come back to you yet.')).toBeInTheDocument()
  expect(screen.getByText('The first results come with a few more looks.')).toBeInTheDocument()
})

it('tells of looks that came late apart from those that count', () => {
  render(<RecordView slug="north" record={record({ late: 2 })} own graders={null} />)
  expect(screen.getByText(/2 more looks came when their candidates had all that they want/)).toBeInTheDocument()
})
