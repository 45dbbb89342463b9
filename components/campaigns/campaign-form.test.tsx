import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { expect, it, vi } from 'vitest'
import type { FormAction } from '@/components/people/use-kept-form'
import { CampaignForm } from './campaign-form'

async function fillIn(): Promise<void> {
  await userEvent.type(screen.getByLabelText('Name of the campaign'), 'North field')
  await userEvent.type(screen.getByLabelText('Survey'), 'Saltmarsh Wide Survey')
  await userEvent.type(screen.getByLabelText('Acronym'), 'SWS')
  await userEvent.type(screen.getByLabelText('Bands'), 'g r i')
}
const send = () => userEvent.click(screen.getByRole('button', { name: 'Create the campaign' }))

it('sends every field, the untouched ones with their defaults', async () => {
  const action = vi.fn<FormAction>().mockResolvedValue({})
  render(<CampaignForm action={action} />)
  await fillIn()
  await send()
  await vi.waitFor(() => expect(action).toHaveBeenCalled())
  expect(Object.fromEntries(action.mock.calls[0][1])).toEqual({
    name: 'North field',
    survey: 'Saltmarsh Wide Survey',
    acronym: 'SWS',
    bands: 'g r i',
    method: 'mean',
    gradesWanted: '6',
    leastGrades: '4',
    confirmMean: '2',
    setAsideMean: '1',
    splitSpread: '1',
    namePattern: '',
  })
})

it('keeps everything that was typed when the server refuses, and leads to the first fault', async () => {
  const action = vi.fn<FormAction>().mockResolvedValue({
    message: 'Nothing was saved yet: see the marked fields.',
    errors: { bands: 'Each band is named once.' },
  })
  render(<CampaignForm action={action} />)
  await fillIn()
  await userEvent.clear(screen.getByLabelText('Grades wanted'))
  await userEvent.type(screen.getByLabelText('Grades wanted'), '5')
  await send()
  expect(await screen.findByText('Each band is named once.')).toBeVisible()
  expect(screen.getByLabelText('Bands')).toHaveFocus()
  expect(screen.getByLabelText('Bands')).toHaveAccessibleDescription(/Each band is named once/)
  expect(screen.getByLabelText('Name of the campaign')).toHaveValue('North field')
  expect(screen.getByLabelText('Grades wanted')).toHaveValue('5')
})

it('says in words what the rule does as its numbers are typed', async () => {
  render(<CampaignForm action={vi.fn<FormAction>()} />)
  expect(screen.getByText(/^6 people look at each candidate/)).toBeVisible()
  const wanted = screen.getByLabelText('Grades wanted')
  await userEvent.clear(wanted)
  expect(screen.getByText(/Fill in all five numbers/)).toBeVisible()
  await userEvent.type(wanted, '3')
  expect(screen.getByText(/^3 people look at each candidate/)).toBeVisible()
})

it('sends the numbers of the chosen method only, and keeps those of the other meanwhile', async () => {
  const action = vi.fn<FormAction>().mockResolvedValue({})
  render(<CampaignForm action={action} />)
  await fillIn()
  await userEvent.type(screen.getByLabelText('Grades wanted'), '{backspace}7')
  await userEvent.click(screen.getByRole('radio', { name: /^Reliability of the graders/ }))
  // Wald: (1 - 0.05) / 0.001 = 950 and (1 - 0.001) / 0.05 = 20.
  expect(screen.getByText(/^At most 10 people look/)).toHaveTextContent(
    /multiply the odds of a lens by 950, set aside when they divide them by 20/,
  )
  await send()
  await vi.waitFor(() => expect(action).toHaveBeenCalled())
  expect(Object.fromEntries(action.mock.calls[0][1])).toMatchObject({
    method: 'reliability',
    gradesWanted: '10',
    leastGrades: '2',
    falseConfirmed: '0.001',
    missedLens: '0.05',
  })
  expect(action.mock.calls[0][1].has('confirmMean')).toBe(false)
  await userEvent.click(screen.getByRole('radio', { name: /^Mean of the grades/ }))
  expect(screen.getByLabelText('Grades wanted')).toHaveValue('7')
})

it('asks about bands that stand the wrong way round, and is quiet about others', async () => {
  render(<CampaignForm action={vi.fn<FormAction>()} />)
  const bands = screen.getByLabelText('Bands')
  await userEvent.type(bands, 'i r g')
  expect(screen.getByRole('status')).toHaveTextContent('Usually r is bluer than i')
  await userEvent.clear(bands)
  await userEvent.type(bands, 'g r F814W')
  expect(screen.queryByRole('status')).toBeNull()
})

it('warns that an acronym must be registered before it is published', () => {
  render(<CampaignForm action={vi.fn<FormAction>()} />)
  expect(screen.getByLabelText('Acronym')).toHaveAccessibleDescription(/must be registered/)
  expect(screen.getByLabelText('Acronym')).toHaveAccessibleDescription(/^3 to 16 letters and digits/)
})
