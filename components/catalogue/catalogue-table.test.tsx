import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { beforeEach, expect, it, vi } from 'vitest'
import type { CatalogueTableRow } from '@/lib/work/catalogue/catalogue-table'
import { CatalogueTable } from './catalogue-table'

vi.mock('next/navigation', () => ({
  useRouter: () => ({ replace: vi.fn() }),
  useSearchParams: () => new URLSearchParams(window.location.search),
}))

const row = (id: number, more: Partial<CatalogueTableRow>): CatalogueTableRow => ({
  id,
  designation: `SWS J00000${id}.00+000000.0`,
  name: `candidate ${id}`,
  raDeg: id / 3,
  decDeg: -id,
  gradeClass: 'A',
  mean: 3,
  spread: 0,
  probability: null,
  votes: { A: 4, B: 0, C: 0, N: 0, U: 0 },
  decidedBy: 'verdict',
  tags: '',
  lensRedshift: null,
  sourceRedshift: null,
  enteredAt: '2026-03-01T00:00:00.000Z',
  thumbnail: null,
  ...more,
})

const ROWS = [
  row(1, { mean: 2, gradeClass: 'B' }),
  row(2, { mean: 3 }),
  row(3, { mean: null, gradeClass: null, decidedBy: 'ruling' }),
  row(4, { mean: 2.6, tags: 'arc, ring' }),
]

beforeEach(() => window.history.replaceState(null, '', '/campaigns/north/catalogue'))

const ids = () =>
  screen
    .queryAllByRole('rowheader')
    .map((cell) => Number(within(cell).getByRole('link').getAttribute('href')?.split('/').at(-1)))
const show = (rows = ROWS) => render(<CatalogueTable slug="north" rows={rows} />)

it('comes with the surest first and what has no mean last', () => {
  show()
  expect(ids()).toEqual([2, 4, 1, 3])
  expect(screen.getByRole('columnheader', { name: 'Mean' })).toHaveAttribute('aria-sort', 'descending')
  expect(window.location.search).toBe('')
})

it('sorts by a head that is a button, both ways, and writes it to the address', async () => {
  const user = userEvent.setup()
  show()
  const button = within(screen.getByRole('columnheader', { name: 'Designation' })).getByRole('button')
  button.focus()
  await user.keyboard('{Enter}')
  expect(ids()).toEqual([1, 2, 3, 4])
  expect(window.location.search).toBe('?sort=designation')
  await user.click(button)
  expect(ids()).toEqual([4, 3, 2, 1])
  expect(window.location.search).toBe('?sort=-designation')
  expect(screen.getByRole('columnheader', { name: 'Mean' })).toHaveAttribute('aria-sort', 'none')
})

it('narrows a column by typing and another by choosing, says how many are left, and clears both', async () => {
  const user = userEvent.setup()
  show()
  await user.click(screen.getByRole('button', { name: 'Filters' }))
  await user.type(screen.getByRole('textbox', { name: 'Filter by mean grade, points' }), '>2')
  await vi.waitFor(() => expect(ids()).toEqual([2, 4]))
  await user.click(screen.getByRole('button', { name: 'A' }))
  expect(window.location.search).toBe('?class=A&mean=%3E2')
  expect(screen.getByRole('status')).toHaveTextContent('2 of 4 entries')
  await user.click(screen.getByRole('button', { name: 'Clear filters' }))
  expect(ids()).toEqual([2, 4, 1, 3])
  expect(window.location.search).toBe('')
})

it('marks a range that cannot be read and lets every row pass', async () => {
  const user = userEvent.setup()
  show()
  await user.click(screen.getByRole('button', { name: 'Filters' }))
  const field = screen.getByRole('textbox', { name: 'Filter by mean grade, points' })
  await user.type(field, 'about 2')
  expect(field).toBeInvalid()
  await vi.waitFor(() => expect(window.location.search).toContain('mean='))
  expect(ids()).toHaveLength(4)
})

it('shows and hides columns as chosen, and writes the choice to the address', async () => {
  const user = userEvent.setup()
  show()
  expect(screen.queryByRole('columnheader', { name: 'Tags' })).toBeNull()
  await user.click(screen.getByRole('button', { name: 'Columns' }))
  await user.click(screen.getByRole('checkbox', { name: 'Tags' }))
  await user.click(screen.getByRole('checkbox', { name: 'Grades' }))
  // The rest of the page is out of reach for readers while the choice is open.
  await user.keyboard('{Escape}')
  expect(screen.getByRole('columnheader', { name: 'Tags' })).toBeInTheDocument()
  expect(screen.queryByRole('columnheader', { name: 'Grades' })).toBeNull()
  const shown = new URLSearchParams(window.location.search).get('columns')?.split(',')
  expect(shown).toContain('tags')
  expect(shown).not.toContain('votes')
})

it('shows from a shared link the same rows in the same order and the same columns', () => {
  window.history.replaceState(null, '', '/campaigns/north/catalogue?sort=-designation&class=A,B&columns=mean,tags')
  show()
  expect(ids()).toEqual([4, 2, 1])
  expect(screen.getAllByRole('columnheader').map((head) => head.textContent)).toEqual(['Designation', 'Mean', 'Tags'])
  expect(screen.getByRole('button', { name: 'Filters (1)' })).toHaveAttribute('aria-expanded', 'true')
})

it('pages through long catalogues and begins anew when the order changes', async () => {
  // One column, and few questions by role: jsdom takes its time with long tables.
  window.history.replaceState(null, '', '/campaigns/north/catalogue?columns=spread')
  const user = userEvent.setup()
  const long = Array.from({ length: 230 }, (_, index) => row(index + 1, {}))
  const { container } = show(long)
  const rowCount = () => container.querySelectorAll('tbody tr').length
  expect(rowCount()).toBe(100)
  await user.click(screen.getByText('Last'))
  expect(window.location.search).toBe('?columns=spread&page=3')
  expect(rowCount()).toBe(30)
  await user.click(screen.getByText('Spread'))
  expect(window.location.search).toBe('?sort=-spread&columns=spread')
  expect(rowCount()).toBe(100)
})

it('says so when nothing passes the filters', () => {
  window.history.replaceState(null, '', '/campaigns/north/catalogue?designation=nowhere')
  show()
  expect(screen.getByText(/Nothing passes these filters/)).toBeInTheDocument()
})

it('moves between rows with the arrow keys', async () => {
  const user = userEvent.setup()
  show()
  const links = screen.getAllByRole('rowheader').map((cell) => within(cell).getByRole('link'))
  links[0].focus()
  await user.keyboard('{ArrowDown}{ArrowDown}{ArrowUp}')
  expect(links[1]).toHaveFocus()
})

it('copies a designation with one click', async () => {
  const user = userEvent.setup()
  show()
  await user.click(screen.getByRole('button', { name: 'Copy designation SWS J000002.00+000000.0' }))
  expect(await navigator.clipboard.readText()).toBe('SWS J000002.00+000000.0')
  expect(screen.getByRole('button', { name: 'designation copied' })).toBeInTheDocument()
})

it('shows the lens probability in the place of the spread where verdicts are by reliability', () => {
  show([row(1, { probability: 0.99871 }), row(2, { probability: null })])
  expect(screen.getByRole('columnheader', { name: 'Lens p' })).toBeVisible()
  expect(screen.getByText('0.999')).toBeVisible()
  expect(screen.queryByRole('columnheader', { name: 'Spread' })).toBeNull()
})

it('has no column for it where they are by the mean', () => {
  show()
  expect(screen.queryByRole('columnheader', { name: 'Lens p' })).toBeNull()
  expect(screen.getByRole('columnheader', { name: 'Spread' })).toBeVisible()
})
