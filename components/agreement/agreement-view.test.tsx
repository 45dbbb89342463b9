import { cleanup, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it, vi } from 'vitest'
import type { FormState } from '@/components/ui/form-state'
import type { AgreementReport, GraderReport } from '@/lib/work/reports/report-types'
import { AgreementView } from './agreement-view'
import { LeaveOutView } from './leave-out-view'

const share = (value: number) => ({ value, interval: { low: value - 0.05, high: value + 0.05 } })

const person: GraderReport = {
  grades: 200,
  cannotJudge: 4,
  calibrationGrades: 40,
  medianSeconds: 3.2,
  lensesSeen: share(0.9),
  nonLensesSeen: share(0.8),
  lenses: 10,
  nonLenses: 190,
  bitsPerLook: 0.1,
  letters: [2.3, 0.9, -0.2, -1.6].map((weight, at) => ({
    grade: (['A', 'B', 'C', 'N'] as const)[at],
    given: 50,
    weight,
  })),
  consistency: { pairs: 8, same: share(0.75), quadratic: 0.7 },
  quickStretch: null,
  drift: { size: 40, windows: [], change: null },
}

function reportWith(change: Partial<AgreementReport> = {}): AgreementReport {
  return {
    madeAt: '2026-03-01T12:00:00.000Z',
    graders: [
      { label: 'curlew', ended: false, personId: 2, leftOut: null },
      {
        label: 'knot',
        ended: false,
        personId: 3,
        leftOut: { since: '2026-02-01T00:00:00.000Z', by: 'avocet', reason: 'Keys swapped' },
      },
    ],
    progress: {
      given: 400,
      remaining: { expected: 100, least: 100, most: 100 },
      lastDays: [0, 0, 0, 0, 0, 0, 0],
      pace: null,
      finish: null,
      reason: 'No estimate: nobody has given a look in the last 7 days.',
    },
    fit: { source: 'run', converged: true, lensShare: 0.02 },
    campaign: {
      coefficients: [
        { key: 'alpha', name: 'Alpha', value: 0.7, interval: { low: 0.65, high: 0.75 }, note: 'Over 100.' },
      ],
      percentAgreement: 0.7,
      candidates: 100,
      resamples: 1000,
    },
    pairs: [
      {
        first: 0,
        second: 1,
        shared: 12,
        quadratic: 0.4,
        quadraticInterval: null,
        plain: 0.3,
        sameGrade: 0.5,
        reason: null,
      },
    ],
    people: [person, person],
    calibration: {
      stamps: 0,
      lensStamps: 0,
      graded: 0,
      prior: null,
      bins: [],
      brierScore: null,
      baseBrierScore: null,
      expectedCalibrationError: null,
    },
    score: null,
    days: { binDays: 1, bins: [{ day: '2026-02-28', byLetter: [1, 2, 3, 4, 0], byGrader: [6, 4] }] },
    alerts: [
      {
        key: 'drift',
        grader: 0,
        title: 'Grades otherwise than at the beginning',
        because: 'From 90 % to 60 %.',
        advice: 'Look.',
      },
    ],
    ...change,
  }
}

const view = (report: AgreementReport, pseudonyms = false) =>
  render(
    <AgreementView
      report={report}
      campaignPath="/campaigns/north"
      fileName="north"
      leastShared={20}
      alertRules={['Alpha below 0.67.']}
      pseudonyms={pseudonyms}
    />,
  )

describe('the Agreement page', () => {
  it('says in its heading how far the graders agree, and why there is no date to be done by', () => {
    view(reportWith())
    expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('Agreement is tentative: alpha 0.70')
    expect(screen.getByRole('heading', { name: 'No date to be done by' })).toBeInTheDocument()
    expect(screen.getByText('No estimate: nobody has given a look in the last 7 days.')).toBeInTheDocument()
  })

  it('counts those who are left out apart from the graders whose reliability it tells', () => {
    const { graders } = reportWith()
    view(reportWith())
    expect(screen.getByRole('heading', { name: 'How reliable 1 grader is, one more left out' })).toBeInTheDocument()
    cleanup()
    view(reportWith({ graders: graders.map((grader) => ({ ...grader, leftOut: null })) }))
    expect(screen.getByRole('heading', { name: 'How reliable 2 graders are' })).toBeInTheDocument()
  })

  it('tells what stands out with the numbers that raised it', () => {
    view(reportWith())
    expect(screen.getByRole('heading', { name: '1 thing to look at' })).toBeInTheDocument()
    const alert = screen.getByText('From 90 % to 60 %.').closest('li')!
    expect(alert).toHaveTextContent('curlew: grades otherwise than at the beginning')
  })

  it('says of each person what their letters are worth, and to leads where to leave them out or count them again', async () => {
    const user = userEvent.setup()
    view(reportWith())
    const panel = screen
      .getAllByRole('group')
      .find((group) => group.querySelector('summary')?.textContent?.includes('curlew'))!
    await user.click(within(panel).getByText('curlew'))
    expect(within(panel).getByRole('row', { name: /A 50 speaks clearly for a lens odds times 10/ })).toBeInTheDocument()
    expect(within(panel).getByRole('link', { name: 'Leave curlew out of the consensus…' })).toHaveAttribute(
      'href',
      '/campaigns/north/agreement/graders/2',
    )
    expect(
      screen.getByText(/Left out of the consensus since 1 Feb 2026 by avocet, because: “Keys swapped”/),
    ).toBeInTheDocument()
    expect(screen.getByText('Count knot’s grades again…')).toBeInTheDocument()
  })

  it('shows viewers since when a person is left out, but neither why nor a way to change it', () => {
    const graders = [
      { label: 'G02', ended: false, personId: null, leftOut: null },
      {
        label: 'G03',
        ended: false,
        personId: null,
        leftOut: { since: '2026-02-01T00:00:00.000Z', by: null, reason: null },
      },
    ]
    view(reportWith({ graders }), true)
    expect(screen.getByText('Left out of the consensus since 1 Feb 2026. The grades stay.')).toBeInTheDocument()
    expect(screen.queryByText(/out of the consensus…|grades again…/)).not.toBeInTheDocument()
  })

  it('says of a pair with few candidates in common that it says little', () => {
    view(reportWith())
    expect(
      screen.getAllByRole('img', { name: /curlew and knot: weighted kappa 0\.40, .*Fewer than 20: says little\./ }),
    ).toHaveLength(2)
  })

  it('says what to do where there are no calibration stamps and no scores, and that nothing is graded yet', () => {
    const { unmount } = view(reportWith())
    expect(screen.getByText(/There are no calibration stamps in this campaign/)).toBeInTheDocument()
    expect(screen.getByText(/Scores come with a manifest/)).toBeInTheDocument()
    unmount()
    view(reportWith({ people: [], graders: [], pairs: [], alerts: [] }))
    expect(screen.getByText('No grades yet')).toBeInTheDocument()
  })

  it('stacks looks by letter, and by person at a button', async () => {
    const user = userEvent.setup()
    view(reportWith())
    expect(screen.getByRole('img', { name: '28 Feb: 10 looks (A 1, B 2, C 3, N 4).' })).toBeInTheDocument()
    await user.click(screen.getByRole('button', { name: 'By person' }))
    expect(screen.getByRole('img', { name: '28 Feb: 10 looks (curlew 6, knot 4).' })).toBeInTheDocument()
  })
})

describe('leaving a grader out', () => {
  const preview = {
    name: 'knot',
    looks: 200,
    leftOut: null,
    moves: [{ from: 'split' as const, to: 'confirmed' as const, candidates: 3 }],
    keptByRuling: 1,
  }

  it('shows what would change before it is done, and keeps what was typed where it is refused', async () => {
    const action = vi.fn(async (_before: FormState, form: FormData): Promise<FormState> => ({
      message: 'Nothing was saved yet: see the marked fields.',
      errors: { reason: 'Give a reason.' },
      values: { reason: String(form.get('reason')) },
    }))
    const user = userEvent.setup()
    render(<LeaveOutView preview={preview} back="/back" longestReason={500} action={action} />)
    expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('Leave knot out of the consensus?')
    expect(screen.getByRole('heading', { level: 2 })).toHaveTextContent('3 candidates would change their state')
    expect(screen.getByText(/1 verdict more would be another, under rulings/)).toBeInTheDocument()
    expect(action).not.toHaveBeenCalled()
    await user.type(screen.getByLabelText('Reason'), ' ')
    await user.click(screen.getByRole('button', { name: 'Leave knot out' }))
    expect(await screen.findByText('Give a reason.')).toBeInTheDocument()
    expect(screen.getByLabelText('Reason')).toHaveFocus()
  })

  it('offers the way back where the person is left out already', () => {
    const leftOut = { personId: 3, reason: 'Keys swapped', decidedBy: 'avocet', since: '2026-02-01T00:00:00.000Z' }
    render(
      <LeaveOutView
        preview={{ ...preview, leftOut, moves: [] }}
        back="/back"
        longestReason={500}
        action={async () => ({})}
      />,
    )
    expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent('Count knot’s grades again?')
    expect(screen.getByRole('heading', { level: 2 })).toHaveTextContent('No candidate would change its state')
    expect(screen.getByRole('link', { name: 'Leave it as it is' })).toHaveAttribute('href', '/back')
  })
})
