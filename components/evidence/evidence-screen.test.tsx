import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it, vi } from 'vitest'
import type { FormState } from '@/components/ui/form-state'
import type { CandidateEvidence, Judgement } from '@/lib/work/rulings/candidate-evidence'
import { LateGrades } from './grade-list'
import { EvidenceScreen } from './evidence-screen'
import { arithmeticInWords, thresholdsInWords } from './verdict-arithmetic'

const AT = '2026-12-01T12:00:00.000Z'
const RULE = {
  method: 'mean' as const,
  id: 1,
  version: 2,
  gradesWanted: 4,
  leastGrades: 3,
  confirmMean: 2,
  setAsideMean: 1,
  splitSpread: 1,
}
const GRADE = {
  own: false,
  occasion: 'first' as const,
  informed: false,
  leftOut: false,
  tags: [],
  remark: null,
  seconds: null,
  givenAt: AT,
}
const GRADES = [
  { ...GRADE, id: 1, by: 'G02', grade: 'A' as const },
  { ...GRADE, id: 2, by: 'G03', grade: 'B' as const },
  { ...GRADE, id: 3, by: 'G04', grade: 'B' as const },
]
// A 3, B 2, B 2: mean 7/3, population standard deviation sqrt(2)/3 = 0.471.
const VERDICT = {
  id: 4,
  outcome: 'confirmed' as const,
  grades: 3,
  cannotJudge: 0,
  mean: 7 / 3,
  spread: Math.SQRT2 / 3,
  probability: null,
  reason: 'Confirmed: 3 grades with mean 2.33, at or above 2.00, and spread 0.47, within 1.00.',
  rule: RULE,
  at: AT,
}

const JUDGEMENT: Judgement = {
  state: 'confirmed',
  stateSince: AT,
  stateReason: VERDICT.reason,
  calibration: false,
  score: 0.91,
  lensRedshift: null,
  sourceRedshift: null,
  votes: { A: 1, B: 2, C: 0, N: 0, U: 0 },
  grades: GRADES,
  late: [],
  verdict: VERDICT,
  why: null,
  rulings: [],
  standingRuling: null,
  history: [{ id: 1, from: 'open', to: 'confirmed', cause: 'verdict', reason: VERDICT.reason, at: AT }],
  designation: 'SWS J004000.00-050000.0',
}

const EVIDENCE: CandidateEvidence = {
  id: 7,
  name: 'SWS0007',
  raDeg: 10,
  decDeg: -5,
  pixelScaleArcsec: 0.2,
  files: [{ name: 'SWS0007_g.fits', bands: ['g'] }],
  pictures: {
    views: [
      {
        key: 'colour',
        label: 'Colour',
        url: null,
        width: 0,
        height: 0,
        note: null,
        geometry: { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true },
      },
      {
        key: 'blue',
        label: 'Blue',
        url: null,
        width: 0,
        height: 0,
        note: null,
        geometry: { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true },
      },
    ],
    geometry: { pixelScaleArcsec: null, northAngleDeg: null, eastLeft: true },
    recipe: null,
    closeFieldArcsec: 12,
    planesUrl: null,
  },
  judgement: JUDGEMENT,
}

function show(
  judgement: Judgement | null,
  ruleAction: ((s: FormState, f: FormData) => Promise<FormState>) | null = null,
) {
  const neighbours = { previous: null, next: { id: 8, name: 'SWS0008' } }
  render(
    <EvidenceScreen
      slug="north"
      personId={7}
      evidence={{ ...EVIDENCE, judgement }}
      neighbours={neighbours}
      talk={null}
      asked={null}
      ruleAction={ruleAction}
    />,
  )
}

describe('the page of a candidate', () => {
  it('tells designation, state with its cause, the sum of the verdict, files and the caution', () => {
    show(JUDGEMENT)
    expect(screen.getByRole('heading', { level: 1, name: 'SWS0007' })).toBeVisible()
    expect(screen.getByText('SWS J004000.00-050000.0')).toBeVisible()
    expect(screen.getByText('3 grades: A 3, B 2, B 2; mean 2.33; spread 0.47.')).toBeVisible()
    expect(screen.getByText(/confirms at a mean of 2.00 or above/)).toBeVisible()
    expect(screen.getAllByText(VERDICT.reason).length).toBeGreaterThan(1)
    expect(screen.getByText('SWS0007_g.fits')).toBeVisible()
    expect(screen.getByText(/not spectroscopic confirmations/)).toBeVisible()
    expect(screen.getByRole('link', { name: 'SWS0008 →' })).toHaveAttribute('href', '/campaigns/north/candidates/8')
    expect(screen.queryByRole('form')).toBeNull()
  })

  it('shows the view of a number key, and leaves it alone while somebody types or single keys are off', async () => {
    const action = vi.fn(async (): Promise<FormState> => ({}))
    show(JUDGEMENT, action)
    const user = userEvent.setup()
    const pressed = (name: string) => screen.getByRole('button', { name }).getAttribute('aria-pressed')
    await user.keyboard('2')
    expect(pressed('Show Blue')).toBe('true')
    await user.keyboard('9')
    expect(pressed('Show Blue')).toBe('true')
    await user.type(screen.getByRole('textbox', { name: /Reason/ }), '1')
    expect(pressed('Show Blue')).toBe('true')
    await user.click(screen.getByRole('checkbox', { name: 'Single keys' }))
    await user.keyboard('1')
    expect(pressed('Show Blue')).toBe('true')
    await user.click(screen.getByRole('checkbox', { name: 'Single keys' }))
    await user.keyboard('1')
    expect(pressed('Show Colour')).toBe('true')
  })

  it('withholds state, grades and verdict from a grader who has not graded it, and leads to the bench', () => {
    show(null)
    expect(screen.getByRole('heading', { name: 'Your eyes first' })).toBeVisible()
    expect(screen.getByRole('link', { name: 'To the bench' })).toHaveAttribute('href', '/campaigns/north/bench')
    expect(screen.queryByText(/confirmed/)).toBeNull()
    expect(screen.queryByText(/Score of the machine/)).toBeNull()
  })

  it('says that a confirmed candidate without a position has no designation yet', () => {
    show({ ...JUDGEMENT, designation: null })
    expect(screen.getByText(/no designation yet/)).toBeVisible()
  })

  it('lets a lead reverse a ruling here, and clears the form once it is done', async () => {
    const ruling = { id: 5, by: 'avocet', outcome: 'set aside' as const, grade: null, reason: 'Tail.', at: AT }
    const action = vi.fn(async (_before: FormState, _form: FormData): Promise<FormState> => ({
      done: 'Ruled: it is open now.',
    }))
    show({ ...JUDGEMENT, state: 'set aside', rulings: [ruling], standingRuling: ruling }, action)
    const form = within(screen.getByRole('form', { name: 'Rule on this candidate' }))
    const user = userEvent.setup()
    await user.click(form.getByRole('radio', { name: 'Reopen' }))
    await user.type(form.getByRole('textbox'), 'Deeper data came.')
    await user.click(form.getByRole('button', { name: 'Reopen' }))
    expect(await form.findByText('Ruled: it is open now.')).toBeVisible()
    expect(Object.fromEntries(action.mock.calls[0][1])).toEqual({
      choice: 'open',
      reason: 'Deeper data came.',
      lastRuling: '5',
    })
    expect(form.getByRole('textbox')).toHaveValue('')
    expect(form.getByRole('radio', { name: 'Reopen' })).not.toBeChecked()
  })
})

describe('the sum of a verdict in words', () => {
  it('leaves the letters out where later grades would not add up to it', () => {
    const later = [...GRADES, { ...GRADE, id: 4, by: 'G05', grade: 'N' as const }]
    expect(arithmeticInWords(VERDICT, later)).toBe('3 grades; mean 2.33; spread 0.47.')
  })

  it('counts who could not judge apart, and has no numbers without a grade', () => {
    const none = { ...VERDICT, grades: 0, cannotJudge: 2, mean: null, spread: null }
    expect(arithmeticInWords(none, [])).toBe('0 grades (and 2 who could not judge, which is no number).')
    expect(thresholdsInWords(none)).toContain('version 2')
  })
})

it('shows what came late apart from the grades that count', () => {
  const late = { ...GRADES[0], id: 99, by: 'knot', occasion: 'late' as const }
  render(<LateGrades grades={[late]} />)
  expect(screen.getByText(/Kept, and counted nowhere/)).toBeInTheDocument()
  expect(screen.getByText('knot')).toBeInTheDocument()
})
