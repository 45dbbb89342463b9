import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { beforeEach, expect, it, vi } from 'vitest'
import type { CandidateTableRow } from '@/lib/work/catalogue/candidate-table'
import type { ColumnsFor } from './candidate-columns'
import { candidateQuery } from './candidate-query'
import { CandidatesScreen } from './candidates-screen'

const push = vi.hoisted(() => vi.fn())
vi.mock('next/navigation', () => ({
  useRouter: () => ({ push, replace: push }),
  usePathname: () => '/campaigns/north/candidates',
  useSearchParams: () => new URLSearchParams(window.location.search),
}))

const row = (id: number, more: Partial<CandidateTableRow> = {}): CandidateTableRow => ({
  id,
  name: `candidate ${id}`,
  raDeg: 1,
  decDeg: -1,
  state: 'open',
  verdict: null,
  designation: null,
  withheld: false,
  votes: { A: 0, B: 0, C: 0, N: 0, U: 0 },
  thumbnail: null,
  lensRedshift: null,
  sourceRedshift: null,
  decidedBy: null,
  enteredAt: null,
  tags: '',
  remarks: '',
  known: [],
  einstein: null,
  ...more,
})

beforeEach(() => {
  push.mockReset()
  window.history.replaceState(null, '', '/campaigns/north/candidates')
})

function show(role: ColumnsFor, rows: CandidateTableRow[], count = rows.length, all = count, byReliability = false) {
  return render(<CandidatesScreen slug="north" role={role} table={{ rows, count, all, byReliability }} />)
}

it('asks the server for another order instead of sorting the page it has', async () => {
  const user = userEvent.setup()
  show('lead', [row(2), row(1)], 250)
  await user.click(within(screen.getByRole('columnheader', { name: 'Candidate' })).getByRole('button'))
  expect(push).toHaveBeenCalledWith('/campaigns/north/candidates?sort=-name', { scroll: false })
  expect(screen.getAllByRole('rowheader').map((cell) => cell.textContent)).toEqual(['candidate 2', 'candidate 1'])
})

it('asks the server for states and for the next page', async () => {
  const user = userEvent.setup()
  show('lead', [row(1)], 250)
  await user.click(screen.getByRole('button', { name: 'Filters' }))
  await user.click(screen.getByRole('button', { name: 'set aside' }))
  expect(push).toHaveBeenLastCalledWith('/campaigns/north/candidates?state=set+aside', { scroll: false })
  await user.click(screen.getByRole('button', { name: 'Next' }))
  expect(push).toHaveBeenLastCalledWith('/campaigns/north/candidates?state=set+aside&page=2', { scroll: false })
})

it('shows the score and the calibration mark to a lead, and no such column to others', () => {
  const { unmount } = show('lead', [row(1, { score: 0.25, calibration: true })])
  expect(screen.getByText('0.250')).toBeInTheDocument()
  expect(screen.getByText('calibration')).toBeInTheDocument()
  unmount()
  show('grader', [row(1, { withheld: true, state: null, votes: null })])
  expect(screen.queryByRole('columnheader', { name: /Score/ })).toBeNull()
  expect(screen.getByText('after your grade')).toBeInTheDocument()
})

it('says what to do while there are no candidates, to each role what they can do', () => {
  const { unmount } = show('lead', [])
  expect(screen.getByRole('link', { name: 'Bring in cutouts' })).toHaveAttribute('href', '/campaigns/north/intake')
  unmount()
  show('grader', [])
  expect(screen.queryByRole('link')).toBeNull()
  expect(screen.getByRole('heading', { level: 1 })).toBeInTheDocument()
})

it('turns an address into what the server is asked for', () => {
  const search = new URLSearchParams('sort=-mean&state=split,not graded by me,nonsense&name= SWS &page=3')
  expect(candidateQuery('grader', search, 100)).toEqual({
    filter: {
      columns: [{ column: 'name', condition: { kind: 'contains', parts: ['SWS'] } }],
      states: ['split'],
      withheld: true,
      notSentOn: false,
    },
    order: 'mean',
    descending: true,
    page: 2,
    pageSize: 100,
    withAnswers: false,
  })
})

it('finds for leads alone what the first pass did not send on', () => {
  const search = new URLSearchParams('state=not sent on,split')
  expect(candidateQuery('lead', search, 100).filter).toMatchObject({ states: ['split'], notSentOn: true })
  expect(candidateQuery('viewer', search, 100).filter).toMatchObject({ states: ['split'], notSentOn: false })
})

it('does not take an order or a state from the address that the role does not have', () => {
  const query = candidateQuery(
    'viewer',
    new URLSearchParams('sort=-score&state=not graded by me&score=>0&calibration=calibration'),
    100,
  )
  expect(query).toMatchObject({
    order: 'name',
    descending: false,
    filter: { columns: [], states: [], withheld: false },
  })
})

it.each([
  [true, 'Lens p', 'Spread'],
  [false, 'Spread', 'Lens p'],
])('tells verdicts by what the rule goes by: by reliability %s', (byReliability, shown, hidden) => {
  show('lead', [row(1)], 1, 1, byReliability)
  expect(screen.getByRole('columnheader', { name: shown })).toBeVisible()
  expect(screen.queryByRole('columnheader', { name: hidden })).toBeNull()
})

it('asks the server for a cone only where both of its fields can be read', () => {
  const coneOf = (search: string) => candidateQuery('viewer', new URLSearchParams(search), 100).filter.cone
  expect(coneOf('near=150.1 2.2&within=2 arcmin')).toMatchObject({ raDeg: 150.1, decDeg: 2.2, radiusArcsec: 120 })
  for (const search of ['near=150.1 2.2', 'within=5', 'near=nowhere&within=5', 'near=150.1 2.2&within=far']) {
    expect(coneOf(search)).toBeUndefined()
  }
})

it('shows a grader no redshift in this list, neither as a column nor as a filter', () => {
  const search = new URLSearchParams('zlens=0..1&sort=zlens')
  expect(candidateQuery('grader', search, 100)).toMatchObject({ filter: { columns: [] }, order: 'name' })
  expect(candidateQuery('viewer', search, 100)).toMatchObject({ filter: { columns: [{ column: 'zlens' }] } })
})
