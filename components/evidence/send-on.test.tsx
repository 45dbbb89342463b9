import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { expect, it } from 'vitest'
import { SendOn } from './send-on'

it('sends on what the first pass did not, and says what came of it', async () => {
  let asked = 0
  const action = async () => {
    asked += 1
    return asked === 1 ? { message: 'There is no such candidate.' } : { done: 'Sent on: it comes to the bench.' }
  }
  render(<SendOn action={action} />)
  const user = userEvent.setup()
  await user.click(screen.getByRole('button', { name: 'Send on to the bench' }))
  expect(await screen.findByText('There is no such candidate.')).toBeVisible()
  await user.click(screen.getByRole('button', { name: 'Send on to the bench' }))
  expect(await screen.findByText('Sent on: it comes to the bench.')).toBeVisible()
})
