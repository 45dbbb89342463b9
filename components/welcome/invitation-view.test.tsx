import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { expect, it, vi } from 'vitest'
import type { FormAction } from '@/components/people/use-kept-form'
import { InvitationView } from './invitation-view'

type Props = Parameters<typeof InvitationView>[0]

const OPEN: Props['invitation'] = {
  kind: 'open',
  campaignName: 'North field',
  slug: 'north-field',
  email: 'knot@saltmarsh.test',
  role: 'grader',
  invitedByName: 'avocet',
  hasAccount: false,
}
const person = (name: string) => ({ id: 1, name, email: `${name}@saltmarsh.test`, isAdmin: false })

function show(invitation: Props['invitation'], viewer: Props['viewer'] = null, accept: FormAction = vi.fn()) {
  render(
    <InvitationView
      invitation={invitation}
      viewer={viewer}
      here="/invitation/abc"
      passwordHint="At least 10 characters."
      acceptAsNewPerson={accept}
      acceptAsViewer={accept}
    />,
  )
}

it.each([
  ['unknown', 'This is no invitation'],
  ['expired', 'This invitation has expired'],
  ['withdrawn', 'This invitation no longer holds'],
  ['used', 'This invitation was accepted already'],
] as const)('says of an %s link what it is, and offers no form', (kind, title) => {
  show({ kind })
  expect(screen.getByRole('heading', { level: 1 })).toHaveTextContent(title)
  expect(screen.queryByRole('form')).toBeNull()
})

it('asks a new person for name and password, and keeps both when they are refused', async () => {
  const accept = vi
    .fn<FormAction>()
    .mockResolvedValue({ message: 'See the fields.', errors: { password: 'Too short.' } })
  show(OPEN, null, accept)
  await userEvent.type(screen.getByLabelText('Your name'), 'knot')
  await userEvent.type(screen.getByLabelText('Password'), 'short')
  await userEvent.click(screen.getByRole('button', { name: 'Join the campaign' }))
  expect(await screen.findByText('Too short.')).toBeVisible()
  expect(screen.getByLabelText('Your name')).toHaveValue('knot')
  expect(screen.getByLabelText('Password')).toHaveValue('short')
})

it('sends somebody with an account to sign in and back here', () => {
  show({ ...OPEN, hasAccount: true })
  expect(screen.getByRole('link', { name: 'Sign in to accept' })).toHaveAttribute(
    'href',
    '/signin?next=%2Finvitation%2Fabc',
  )
})

it('lets the invited person accept with one button, and nobody else', () => {
  show({ ...OPEN, hasAccount: true }, person('Knot'))
  expect(screen.getByRole('button', { name: 'Accept and open the campaign' })).toBeVisible()
})

it('offers another person who is signed in only to change account', () => {
  show({ ...OPEN, hasAccount: true }, person('dunlin'))
  expect(screen.queryByRole('button', { name: /Accept/ })).toBeNull()
  expect(screen.getByText(/You are signed in as dunlin@saltmarsh.test/)).toBeVisible()
  expect(screen.getByRole('button', { name: 'Sign out and change account' })).toBeVisible()
})
