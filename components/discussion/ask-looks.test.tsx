import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it, vi } from 'vitest'
import type { FormState } from '@/components/ui/form-state'
import type { Ask, Askable } from '@/lib/work/discussion/list-asks'
import { AskForm, AskList } from './ask-looks'

const person = (personId: number, name: string, more: Partial<Askable> = {}): Askable => ({
  personId,
  name,
  role: 'grader',
  grade: null,
  shown: false,
  asked: false,
  leftOut: false,
  ...more,
})
const PEOPLE = [
  person(1, 'avocet', { role: 'lead', shown: true }),
  person(2, 'curlew', { grade: 'B' }),
  person(3, 'dunlin', { grade: 'N', shown: true }),
  person(4, 'plover', { asked: true }),
  person(5, 'ruff', { grade: 'U' }),
  person(6, 'knot', { grade: 'A', leftOut: true }),
]
const ask = (id: number, of: string, state: Ask['state']): Ask => ({
  id,
  of,
  by: 'avocet',
  note: id === 1 ? 'Mind the arc.' : null,
  at: '2026-12-01T12:00:00.000Z',
  state,
})

function show(answer: FormState = { done: 'curlew is asked.' }) {
  const action = vi.fn(async (_before: FormState, _form: FormData) => answer)
  render(<AskForm people={PEOPLE} action={action} />)
  return { action, user: userEvent.setup() }
}
const box = (name: RegExp) => screen.getByRole('checkbox', { name })

describe('asking for another look', () => {
  it('names everybody with what speaks for or against asking them, and bars who is asked or has seen the others’ grades', () => {
    show()
    expect(box(/avocet lead, sees the others’ grades; has not graded it/)).toBeEnabled()
    expect(box(/curlew gave B/)).toBeEnabled()
    expect(box(/dunlin has seen the others’ grades/)).toBeDisabled()
    expect(box(/plover is asked already/)).toBeDisabled()
    expect(box(/ruff could not judge it/)).toBeEnabled()
    expect(box(/knot is left out of the consensus: a look would not count/)).toBeEnabled()
  })

  it('sends whom and the note, and is empty then', async () => {
    const { action, user } = show()
    await user.click(box(/curlew/))
    await user.click(box(/ruff/))
    await user.type(screen.getByRole('textbox', { name: 'Note to them' }), 'Mind the arc.')
    await user.click(screen.getByRole('button', { name: 'Ask for a look' }))
    expect(action.mock.calls[0][1].getAll('people')).toEqual(['2', '5'])
    expect(action.mock.calls[0][1].get('note')).toBe('Mind the arc.')
    expect(await screen.findByText('curlew is asked.')).toBeVisible()
    expect(box(/curlew/)).not.toBeChecked()
  })

  it('that is refused keeps whom and the note, and says why', async () => {
    const { user } = show({ message: 'Nothing was saved yet.', errors: { people: 'Choose whom you ask.' } })
    await user.type(screen.getByRole('textbox', { name: 'Note to them' }), 'Mind the arc.')
    await user.click(screen.getByRole('button', { name: 'Ask for a look' }))
    expect(await screen.findByText('Choose whom you ask.')).toBeVisible()
    expect(screen.getByRole('textbox', { name: 'Note to them' })).toHaveValue('Mind the arc.')
  })
})

describe('looks that were asked for', () => {
  const asks = [ask(1, 'curlew', 'answered'), ask(2, 'dunlin', 'open'), ask(3, 'plover', 'withdrawn')]

  it('are listed with what came of them; a lead withdraws an open one', async () => {
    const withdraw = vi.fn(async (_before: FormState, _form: FormData): Promise<FormState> => ({ done: 'Withdrawn.' }))
    render(<AskList asks={asks} withdraw={withdraw} />)
    const items = within(screen.getByRole('list', { name: 'Looks asked for' })).getAllByRole('listitem')
    expect(items.map((item) => item.textContent)).toEqual([
      'curlew has looked, asked by avocet, 1 Dec 2026“Mind the arc.”',
      expect.stringContaining('dunlin is asked for a look'),
    ])
    await userEvent.setup().click(screen.getByRole('button', { name: 'Withdraw the look asked of dunlin' }))
    expect(withdraw.mock.calls[0][1].get('ask')).toBe('2')
  })

  it('cannot be withdrawn by anybody else, and a refusal is said', async () => {
    const { rerender } = render(<AskList asks={asks} withdraw={null} />)
    expect(screen.queryByRole('button')).toBeNull()
    const refused = async (): Promise<FormState> => ({ message: 'dunlin has given this look already.' })
    rerender(<AskList asks={asks} withdraw={refused} />)
    await userEvent.setup().click(screen.getByRole('button', { name: /Withdraw/ }))
    expect(await screen.findByRole('alert')).toHaveTextContent('dunlin has given this look already.')
  })
})
