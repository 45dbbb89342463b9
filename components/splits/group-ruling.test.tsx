import { screen, within } from '@testing-library/react'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { FormState } from '@/components/ui/form-state'
import { show } from './_splits-fixture'
import { alikeInWords, alikeTo } from './alike'
import type { GroupState } from './group-ruling'

const push = vi.fn()
vi.mock('next/navigation', async (original) => ({
  ...(await original<Record<string, unknown>>()),
  useRouter: () => ({ push }),
}))

beforeEach(() => {
  push.mockClear()
  localStorage.clear()
})

const box = (name: string) => screen.getByRole('checkbox', { name: `Select ${name}` })
const selected = () =>
  screen
    .queryAllByRole('checkbox', { name: /^Select SWS/ })
    .filter((one) => (one as HTMLInputElement).checked)
    .map((one) => one.getAttribute('aria-label')?.slice(-1))
const panel = () => within(screen.getByRole('region', { name: 'Ruling on several' }))
const groupOf = (ruled: number[], refused: number[] = []): GroupState => ({
  done: 'Ruled.',
  group: {
    outcome: 'set aside',
    grade: null,
    ruled: ruled.map((id) => ({
      candidateId: id,
      name: `SWS000${id}`,
      rulingId: 70 + id,
      asksWithdrawn: id === 1 ? 1 : 0,
      sentOn: false,
      state: 'set aside' as const,
    })),
    refused: refused.map((id) => ({ candidateId: id, name: `SWS000${id}`, reason: 'plover has ruled meanwhile.' })),
  },
})

describe('selecting several splits', () => {
  it('works by mouse, with Shift from one to another, and shows the selected side by side', async () => {
    const { user } = show()
    await user.click(box('SWS0001'))
    await user.keyboard('{Shift>}')
    await user.click(box('SWS0003'))
    await user.keyboard('{/Shift}')
    expect(selected()).toEqual(['1', '2', '3'])
    expect(panel().getByRole('heading', { name: 'One ruling for the 3 selected' })).toBeVisible()
    expect(within(panel().getByRole('list', { name: 'Selected' })).getAllByRole('button')).toHaveLength(3)
    await user.click(panel().getByRole('button', { name: 'Select none' }))
    expect(selected()).toEqual([])
    expect(screen.getByRole('form', { name: 'Rule on this candidate' })).toBeVisible()
  })

  it('works by keyboard: S for one, Shift and J on the way, Shift and S for those alike, Esc for none', async () => {
    const { user } = show()
    await user.keyboard('s')
    expect(selected()).toEqual(['2'])
    await user.keyboard('{Shift>}j{/Shift}')
    expect(selected()).toEqual(['2', '3'])
    expect(push).toHaveBeenLastCalledWith('/campaigns/north/splits?case=3', { scroll: false })
    await user.keyboard('{Escape}')
    expect(selected()).toEqual([])
    await user.keyboard('{Shift>}s{/Shift}')
    expect(selected()).toEqual(['1', '2', '3'])
  })

  it('names those alike and selects them by button', async () => {
    const { user } = show()
    await user.click(screen.getByRole('button', { name: 'Select the 3 with the same votes' }))
    expect(selected()).toEqual(['1', '2', '3'])
  })
})

describe('one ruling for the selected', () => {
  it('sends every selected split with the ruling that was seen, by keyboard alone, and tells what came of each', async () => {
    const groupAction = vi.fn(async (_before: FormState, _form: FormData) => groupOf([2], [3]))
    const { user } = show({ groupAction })
    await user.keyboard('s{Shift>}j{/Shift}nr')
    await user.keyboard('Edge-on discs.{Control>}{Enter}{/Control}')
    expect(Object.fromEntries(groupAction.mock.calls[0][1])).toEqual({
      cases: '2:,3:',
      choice: 'set-aside',
      reason: 'Edge-on discs.',
      lastRuling: '',
    })
    expect(await screen.findByText(/1 candidate is set aside/)).toHaveTextContent('1 was refused:')
    expect(screen.getByText(/plover has ruled meanwhile/)).toHaveTextContent('SWS0003')
  })

  it('is taken back as a group, by the rulings just made', async () => {
    const undoGroupAction = vi.fn(async (_before: FormState, _form: FormData): Promise<GroupState> => {
      const { group } = groupOf([1, 2])
      return { group: { ...group!, outcome: 'by verdict' } }
    })
    const { user } = show({ groupAction: async () => groupOf([1, 2]), undoGroupAction })
    await user.click(box('SWS0001'))
    await user.click(box('SWS0002'))
    await user.click(panel().getByRole('radio', { name: 'Set aside' }))
    await user.type(panel().getByRole('textbox'), 'Discs.')
    await user.click(panel().getByRole('button', { name: 'Set aside (2)' }))
    expect(
      await screen.findByText(/1 asked look was withdrawn, and taking it back asks for none again\./),
    ).toBeVisible()
    await user.click(await screen.findByRole('button', { name: 'Take them all back' }))
    expect(Object.fromEntries(undoGroupAction.mock.calls[0][1])).toEqual({ cases: '1:71,2:72' })
    expect(await screen.findByText(/2 candidates are by verdict again/)).toBeVisible()
    expect(screen.queryByRole('button', { name: 'Take them all back' })).toBeNull()
  })

  it('that is refused keeps the selection, the choice and the reason', async () => {
    const errors = { reason: 'Give a reason: it is kept with the ruling.' }
    const { user } = show({ groupAction: async () => ({ message: 'Nothing was saved yet.', errors }) })
    await user.keyboard('s{Shift>}j{/Shift}n')
    await user.type(panel().getByRole('textbox'), '  ')
    await user.click(panel().getByRole('button', { name: 'Set aside (2)' }))
    expect(await screen.findByText(errors.reason)).toBeVisible()
    expect(selected()).toEqual(['2', '3'])
    expect(panel().getByRole('radio', { name: 'Set aside' })).toBeChecked()
    expect(panel().getByRole('textbox')).toHaveValue('  ')
  })
})

describe('the order', () => {
  it('is named with what it means, and another is in the address', async () => {
    const { user } = show()
    expect(screen.getByText(/farthest from both thresholds/)).toBeVisible()
    await user.selectOptions(screen.getByRole('combobox', { name: 'Sorted by' }), 'spread')
    expect(push).toHaveBeenLastCalledWith('/campaigns/north/splits?sort=spread')
  })
})

describe('splits alike', () => {
  const votes = (A: number, N: number) => ({ A, B: 0, C: 0, N, U: 0 })

  it('by the mean are those with the same votes', () => {
    const cases = [votes(2, 2), votes(2, 2), votes(3, 1)].map((v, id) => ({ id, votes: v, probability: null }))
    expect(alikeTo(cases, 0)).toEqual([0, 1])
    expect(alikeInWords(cases[0])).toBe('with the same votes')
  })

  it('by reliability are those in the same tenth of probability', () => {
    const cases = [0.31, 0.39, 0.4, 1].map((probability, id) => ({ id, votes: votes(id, 1), probability }))
    expect(alikeTo(cases, 0)).toEqual([0, 1])
    expect(alikeTo(cases, 3)).toEqual([3])
    expect(alikeInWords(cases[0])).toBe('with a probability of 0.3 to 0.4')
    expect(alikeInWords(cases[3])).toBe('with a probability of 0.9 to 1.0')
  })
})
