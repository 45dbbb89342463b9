import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { signIn } from 'next-auth/react'
import { beforeEach, expect, it, vi } from 'vitest'
import { SignInForm } from './sign-in-form'

vi.mock('next-auth/react', () => ({ signIn: vi.fn() }))
const answer = vi.mocked(signIn)
type Result = Awaited<ReturnType<typeof signIn>>

beforeEach(() => {
  answer.mockReset()
})

async function fillIn(email: string, password: string): Promise<void> {
  if (email) await userEvent.type(screen.getByLabelText('E-mail'), email)
  if (password) await userEvent.type(screen.getByLabelText('Password'), password)
  await userEvent.keyboard('{Enter}')
}

it('signs in with Enter and goes where the person wanted to go', async () => {
  answer.mockResolvedValue({ ok: true } as Result)
  const goTo = vi.fn()
  render(<SignInForm next="/campaigns/north-field" goTo={goTo} />)
  await fillIn('curlew@saltmarsh.test ', 'a curlew calls')
  await vi.waitFor(() => expect(goTo).toHaveBeenCalledWith('/campaigns/north-field'))
  expect(answer).toHaveBeenCalledWith('credentials', {
    email: 'curlew@saltmarsh.test',
    password: 'a curlew calls',
    redirect: false,
  })
})

it('says in one sentence that they do not fit, goes nowhere, and keeps both', async () => {
  answer.mockResolvedValue({ ok: false, error: 'CredentialsSignin' } as Result)
  const goTo = vi.fn()
  render(<SignInForm next="/" goTo={goTo} />)
  await fillIn('curlew@saltmarsh.test', 'wrong')
  expect(await screen.findByRole('alert')).toHaveTextContent('No account has this address and password together')
  expect(screen.getByLabelText('E-mail')).toHaveValue('curlew@saltmarsh.test')
  expect(screen.getByLabelText('Password')).toHaveValue('wrong')
  expect(goTo).not.toHaveBeenCalled()
})

it('passes on that one has to wait', async () => {
  answer.mockResolvedValue({ ok: false, error: 'Too many wrong passwords for this address.' } as Result)
  render(<SignInForm next="/" goTo={vi.fn()} />)
  await fillIn('curlew@saltmarsh.test', 'wrong')
  expect(await screen.findByRole('alert')).toHaveTextContent('Too many wrong passwords')
})

it('says that the server did not answer when the connection is gone', async () => {
  answer.mockRejectedValue(new TypeError('fetch failed'))
  render(<SignInForm next="/" goTo={vi.fn()} />)
  await fillIn('curlew@saltmarsh.test', 'a curlew calls')
  expect(await screen.findByRole('alert')).toHaveTextContent('The server did not answer')
})

it('asks for what is missing, puts the focus there and asks no server', async () => {
  render(<SignInForm next="/" goTo={vi.fn()} />)
  await fillIn('curlew@saltmarsh.test', '')
  expect(await screen.findByText('Enter your password.')).toBeVisible()
  expect(screen.getByLabelText('Password')).toHaveFocus()
  expect(answer).not.toHaveBeenCalled()
})

it('tells password managers what is what, and shows the password on demand', async () => {
  render(<SignInForm next="/" goTo={vi.fn()} />)
  expect(screen.getByLabelText('E-mail')).toHaveAttribute('autocomplete', 'username')
  const password = screen.getByLabelText('Password')
  expect(password).toHaveAttribute('autocomplete', 'current-password')
  expect(password).toHaveAttribute('type', 'password')
  await userEvent.click(screen.getByRole('button', { name: 'Show what is typed' }))
  expect(password).toHaveAttribute('type', 'text')
})
