import { fireEvent, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { beforeEach, expect, it, vi } from 'vitest'
import type { CatalogueTableRow } from '@/lib/work/catalogue/catalogue-table'
import { catalogueQuery } from './catalogue-query'
import { CatalogueScreen } from './catalogue-screen'
import { CatalogueTable } from './catalogue-table'

const router = vi.hoisted(() => ({ push: vi.fn(), replace: vi.fn() }))
vi.mock('next/navigation', () => ({
  useRouter: () => router,
  useSearchParams: () => new URLSearchParams(window.location.search),
  usePathname: () => '/campaigns/north/catalogue',
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
  remarks: '',
  lensRedshift: null,
  sourceRedshift: null,
  enteredAt: '2026-03-01T00:00:00.000Z',
  thumbnail: null,
  known: [],
  einstein: null,
  ...more,
})

const ROWS = [row(2, { mean: 3 }), row(4, { mean: 2.6 }), row(1, { mean: 2, gradeClass: 'B' })]
const PATH = '/campaigns/north/catalogue'
const STILL = { scroll: false }

beforeEach(() => {
  router.push.mockReset()
  router.replace.mockReset()
  window.history.replaceState(null, '', PATH)
})

const show = (rows = ROWS, count = rows.length, byReliability = false) =>
  render(<CatalogueTable slug="north" catalogue={{ rows, count, all: 230, byReliability }} />)
const heads = () => screen.getAllByRole('columnheader').map((head) => head.textContent)

it('asks for the surest first as it comes, and by another column as its head is pressed, as a step of the history', async () => {
  const user = userEvent.setup()
  show()
  expect(screen.getByRole('columnheader', { name: 'Mean' })).toHaveAttribute('aria-sort', 'descending')
  expect(catalogueQuery(new URLSearchParams(), 100)).toMatchObject({ order: 'mean', descending: true, page: 0 })
  const button = within(screen.getByRole('columnheader', { name: 'Designation' })).getByRole('button')
  button.focus()
  await user.keyboard('{Enter}')
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?sort=designation`, STILL)
  await user.click(button)
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?sort=-designation`, STILL)
})

it('has a filter for every column, shown or not, and writes what is typed after a pause as one step of the history', async () => {
  show()
  fireEvent.click(screen.getByText('Filters'))
  const type = (text: string) =>
    fireEvent.change(screen.getByLabelText('Redshift of the lens'), { target: { value: text } })
  type('0.2..0.5')
  await vi.waitFor(() => expect(router.push).toHaveBeenCalledWith(`${PATH}?zlens=0.2..0.5`, STILL))
  type('0.2..0.55')
  await vi.waitFor(() => expect(router.replace).toHaveBeenCalledWith(`${PATH}?zlens=0.2..0.55`, STILL))
  fireEvent.click(screen.getByText('B', { selector: 'button' }))
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?class=B&zlens=0.2..0.55`, STILL)
  fireEvent.click(screen.getByText('Clear filters'))
  expect(router.push).toHaveBeenLastCalledWith(PATH, STILL)
})

it('leaves the filters with Escape, back on the button that opened them', () => {
  show()
  fireEvent.click(screen.getByText('Filters'))
  fireEvent.keyDown(screen.getByLabelText('Tags'), { key: 'Escape' })
  expect(screen.queryByLabelText('Tags')).toBeNull()
  expect(screen.getByText('Filters')).toHaveFocus()
})

it('keeps what cannot be read, says beside the field what is wrong, and asks the server for nothing by it', async () => {
  const user = userEvent.setup()
  window.history.replaceState(null, '', `${PATH}?mean=about+2&near=150&entered=2026-13`)
  show()
  await user.click(screen.getByRole('button', { name: 'Filters (3)' }))
  const field = screen.getByRole('textbox', { name: 'Mean grade, points' })
  expect(field).toHaveValue('about 2')
  expect(field).toBeInvalid()
  expect(field).toHaveAccessibleDescription(/“about 2” is no range of numbers/)
  expect(screen.getByRole('textbox', { name: /Round the position/ })).toHaveAccessibleDescription(
    /“150” is no position/,
  )
  expect(screen.getByRole('textbox', { name: /Entered/ })).toHaveAccessibleDescription(/no day or range of days/)
  expect(catalogueQuery(new URLSearchParams(window.location.search), 100).filter).toEqual({ columns: [] })
})

it('says which filters are set while their fields are shut, and takes off each by itself', async () => {
  const user = userEvent.setup()
  window.history.replaceState(null, '', `${PATH}?class=A,B&mean=%3E2`)
  show(ROWS, 3)
  expect(screen.getByRole('status')).toHaveTextContent('3 of 230 entries')
  await user.click(screen.getByRole('button', { name: 'Take off the filter Class A or B' }))
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?mean=%3E2`, STILL)
})

it('shows, hides and moves columns as chosen, and writes their order to the address', async () => {
  const user = userEvent.setup()
  window.history.replaceState(null, '', `${PATH}?columns=mean,class`)
  show()
  expect(heads()).toEqual(['Designation', 'Mean', 'Class'])
  await user.click(screen.getByRole('button', { name: 'Columns' }))
  await user.click(screen.getByRole('checkbox', { name: 'Tags' }))
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?columns=mean,class,tags`, STILL)
  await user.click(screen.getByRole('button', { name: /Move Tags before/ }))
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?columns=mean,tags,class`, STILL)
  const first = screen.getByRole('button', { name: /Move Mean grade, points before/ })
  expect(first).toHaveAttribute('aria-disabled', 'true')
  // The rest of the page is out of reach for readers while the choice is open.
  await user.keyboard('{Escape}')
  expect(heads()).toEqual(['Designation', 'Mean', 'Tags', 'Class'])
})

it('pages through long catalogues and begins anew when the order changes', async () => {
  window.history.replaceState(null, '', `${PATH}?columns=spread&page=2`)
  const user = userEvent.setup()
  show(ROWS, 230)
  await user.click(screen.getByText('Last'))
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?columns=spread&page=3`, STILL)
  await user.click(screen.getByText('Spread'))
  expect(router.push).toHaveBeenLastCalledWith(`${PATH}?sort=-spread&columns=spread`, STILL)
})

it('says so when nothing passes the filters', () => {
  window.history.replaceState(null, '', `${PATH}?designation=nowhere`)
  show([], 0)
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

it.each([
  [true, 'Lens p', 'Spread'],
  [false, 'Spread', 'Lens p'],
])('tells entries by what the rule goes by: by reliability %s', (byReliability, shown, hidden) => {
  show([row(1, { probability: 0.99871 })], 1, byReliability)
  expect(screen.getByRole('columnheader', { name: shown })).toBeVisible()
  expect(screen.queryByRole('columnheader', { name: hidden })).toBeNull()
})

it('tells what an entry is known as and how wide its arc was measured, where that is asked for', () => {
  window.history.replaceState(null, '', `${PATH}?columns=known,einstein`)
  const known = [{ name: 'RS 1041', list: 'Older rings', separationArcsec: 0.31 }]
  show([row(1, { known, einstein: { radiusArcsec: 1.234, errorArcsec: 0.05, count: 2 } })])
  expect(screen.getByText('RS 1041')).toHaveAttribute('title', 'RS 1041, Older rings, 0.31 arcsec away')
  expect(screen.getByText('1.23 ± 0.05')).toBeVisible()
})

it('has a heading also while nothing is confirmed', () => {
  const catalogue = { rows: [], count: 0, all: 0, ownOnly: false, mayExport: true, byReliability: false }
  const next = { href: '/', label: 'See all candidates' }
  render(<CatalogueScreen slug="north" catalogue={catalogue} classRule="by the mean" next={next} />)
  expect(screen.getByRole('heading', { level: 1 })).toBeVisible()
})
