import { render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { FormState } from '@/components/ui/form-state'
import { THREAD } from './_people'
import { Discussion } from './discussion'

beforeEach(() => sessionStorage.clear())

function show(answer: FormState = { done: 'Sent.' }, thread = THREAD) {
  const action = vi.fn(async (_before: FormState, _form: FormData) => answer)
  const view = render(<Discussion thread={thread} action={action} draftKey="7-1" />)
  return { action, user: userEvent.setup(), ...view }
}
const box = () => screen.getByRole('textbox', { name: 'Message' })
const offered = () => screen.queryAllByRole('option').map((option) => option.textContent)

describe('a discussion', () => {
  it('shows messages as plain text with safe links and the reader’s own mention marked', () => {
    show()
    const [first] = within(screen.getByRole('list', { name: '2 messages' })).getAllByRole('listitem')
    expect(first).toHaveTextContent('@avocet (you), see <b>this</b>: https://marsh.test/atlas')
    const link = screen.getByRole('link', { name: 'https://marsh.test/atlas' })
    expect(link).toHaveAttribute('rel', 'noopener noreferrer nofollow')
    expect(link).toHaveAttribute('href', 'https://marsh.test/atlas')
  })

  it('lets a viewer read and not write', () => {
    show({}, { ...THREAD, mayWrite: false, mentionable: [] })
    expect(screen.queryByRole('textbox')).toBeNull()
    expect(screen.getByText(/Viewers read along/)).toBeVisible()
  })

  it('sends with Ctrl and Enter, and is empty then', async () => {
    const { user, action } = show()
    await user.type(box(), 'A tail, I think.{Control>}{Enter}{/Control}')
    expect(action.mock.calls[0][1].get('body')).toBe('A tail, I think.')
    expect(await screen.findByText('Sent.')).toBeVisible()
    expect(box()).toHaveValue('')
    expect(sessionStorage).toHaveLength(0)
  })

  it('keeps the text when it is refused, says why at the field, and over another page', async () => {
    const { user, unmount } = show({ message: 'Not sent.', errors: { body: 'A message has at most 4000 characters.' } })
    await user.type(box(), 'Long.')
    await user.click(screen.getByRole('button', { name: 'Send' }))
    expect(await screen.findByText(/at most 4000/)).toBeVisible()
    expect(box()).toHaveValue('Long.')
    expect(box()).toBeInvalid()
    unmount()
    show()
    expect(box()).toHaveValue('Long.')
  })
})

describe('a mention', () => {
  it('is offered from an @ on and taken with Enter, by arrows, without sending', async () => {
    const { user, action } = show()
    await user.type(box(), 'What says @cur')
    expect(offered()).toEqual(['curlew', 'curlew sandpipergrades it first, then reads this'])
    await user.keyboard('{ArrowDown}{Enter}')
    expect(box()).toHaveValue('What says @curlew sandpiper ')
    expect(offered()).toEqual([])
    expect(action).not.toHaveBeenCalled()
    await user.keyboard('and @')
    expect(offered()).toHaveLength(3)
    await user.keyboard('{ArrowUp}{Tab}')
    expect(box()).toHaveValue('What says @curlew sandpiper and @dunlin ')
  })

  it('can be taken by mouse, and Esc closes the offer and keeps the text', async () => {
    const { user } = show()
    await user.type(box(), '@d')
    await user.click(screen.getByRole('option', { name: /dunlin/ }))
    expect(box()).toHaveValue('@dunlin ')
    expect(box()).toHaveFocus()
    await user.type(box(), '@c')
    await user.keyboard('{Escape}')
    expect(offered()).toEqual([])
    expect(box()).toHaveValue('@dunlin @c')
    expect(box()).toHaveFocus()
  })

  it('is not offered within a word, nor of nobody', async () => {
    const { user } = show()
    await user.type(box(), 'curlew@d')
    expect(offered()).toEqual([])
    await user.type(box(), ' @xyz')
    expect(offered()).toEqual([])
  })
})
