import { act, cleanup, fireEvent, render, screen, within } from '@testing-library/react'
import { afterEach, expect, it, vi } from 'vitest'
import type { DuplicateMember, DuplicatesPage } from '@/lib/work/matching/duplicates-page'
import { duplicateCommand } from './duplicate-keys'
import { DuplicatesScreen } from './duplicates-screen'
import { KnownLabelMark } from './known-label'
import { likeliestKept } from './likeliest-kept'

afterEach(cleanup)

const member = (id: number, change: Partial<DuplicateMember> = {}): DuplicateMember => ({
  id,
  name: `SWS ${id}`,
  state: 'open',
  raDeg: 10,
  decDeg: 5,
  separationArcsec: 0.5,
  votes: { A: 0, B: 0, C: 0, N: 0, U: 0 },
  picture: null,
  known: [],
  ...change,
})
const group = (...members: DuplicateMember[]) => ({ members, nearestArcsec: 0.5, widestArcsec: 0.8 })
const page = (...groups: DuplicatesPage['groups']): DuplicatesPage => ({
  radiusArcsec: 2,
  total: groups.length,
  groups,
  different: [],
  merged: [],
  due: 0,
})

function show(shown: DuplicatesPage) {
  const action = () => vi.fn(async (_before: object, _form: FormData) => ({ done: 'Done.' }))
  const actions = { mergeAction: action(), differAction: action(), partAction: action() }
  render(
    <DuplicatesScreen
      slug="north"
      personId={1}
      page={shown}
      {...actions}
      againAction={action()}
      radiusAction={action()}
    />,
  )
  return actions
}
const press = (key: string) => act(() => fireEvent.keyDown(document.body, { key, code: '' }))

it('keeps what is confirmed, then what has most grades, unless somebody chooses', () => {
  const graded = { A: 0, B: 2, C: 0, N: 0, U: 3 }
  expect(likeliestKept(group(member(1), member(2, { votes: graded }), member(3)))).toBe(1)
  expect(likeliestKept(group(member(1, { votes: graded }), member(2, { state: 'confirmed' })))).toBe(1)
  expect(likeliestKept(group(member(1), member(2)))).toBe(0)
})

it('merges the chosen into the one that a key has kept, with the reason', async () => {
  const { mergeAction } = show(page(group(member(1), member(2), member(3))))
  press('2')
  // The others are the same object until one of them is left out.
  fireEvent.click(within(screen.getByRole('list', { name: 'Candidates of the group' })).getAllByRole('checkbox')[1])
  fireEvent.change(screen.getAllByLabelText('Reason, kept with the decision')[0], { target: { value: 'One galaxy.' } })
  await act(async () => fireEvent.click(screen.getByRole('button', { name: 'Merge into SWS 2' })))
  const form = mergeAction.mock.calls[0][1]
  expect(Object.fromEntries(form)).toEqual({ kept: '2', merged: '1', reason: 'One galaxy.' })
})

it('says where a confirmed one would leave the catalogue for one that is not confirmed', () => {
  show(page(group(member(1, { state: 'confirmed' }), member(2, { state: 'set aside' }))))
  expect(screen.queryByText(/would leave the catalogue/)).toBeNull()
  press('2')
  expect(screen.getByText(/would leave the catalogue for SWS 2, which is set aside/)).toBeTruthy()
})

it('goes through the groups by keys and does not go past the ends', () => {
  show(page(group(member(1), member(2)), group(member(3), member(4))))
  press('k')
  expect(screen.getByRole('article', { name: 'SWS 1, SWS 2' })).toBeTruthy()
  press('j')
  press('j')
  expect(screen.getByRole('article', { name: 'SWS 3, SWS 4' })).toBeTruthy()
  press('d')
  expect(document.activeElement?.closest('form')?.getAttribute('aria-label')).toBe('Different')
})

it('hears no key with a modifier, and none that means nothing', () => {
  const event = { code: '', ctrlKey: false, altKey: false, metaKey: false, shiftKey: false, isComposing: false }
  expect(duplicateCommand({ ...event, key: 'm' })).toEqual({ do: 'same' })
  expect(duplicateCommand({ ...event, key: 'm', ctrlKey: true })).toBeNull()
  expect(duplicateCommand({ ...event, key: 'M', shiftKey: true })).toBeNull()
  expect(duplicateCommand({ ...event, key: 'x' })).toBeNull()
})

it('says what to do where there is nothing to merge', () => {
  show(page())
  expect(screen.getByRole('heading', { level: 1 }).textContent).toBe('No candidate is proposed twice')
  expect(screen.getByText(/A wider radius finds more/)).toBeTruthy()
})

it('labels with the nearest object, tells the others in full, and is nothing without any', () => {
  const label = (name: string, separationArcsec: number) => ({ name, list: 'Marsh lenses', separationArcsec })
  render(<KnownLabelMark labels={[label('Old ring', 0.214), label('X 12', 12.34)]} />)
  const mark = screen.getByTitle('Known as Old ring of Marsh lenses, 0.21″ away; X 12 of Marsh lenses, 12.3″ away')
  expect(mark.textContent).toBe('known: Old ring+1')
  cleanup()
  const { container } = render(<KnownLabelMark labels={[]} />)
  expect(container.textContent).toBe('')
})
