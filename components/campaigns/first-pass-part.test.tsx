import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { expect, it } from 'vitest'
import { FirstPassPart } from './first-pass-part'
import { SheetForm } from './sheet-form'

const progress = { waiting: 500, sentOn: 20, dropped: 480 }

it('tells a lead how far the first pass is and what share of known lenses it sent on, with its interval', () => {
  // Newcombe (1998), method 3, for 81 of 263: 25.53 to 36.62 %.
  const completeness = { lenses: 263, sentOn: 81, interval: { low: 0.2553, high: 0.3662 } }
  render(<FirstPassPart progress={progress} completeness={completeness} campaignPath="/campaigns/n" passes />)
  expect(screen.getByRole('heading', { name: '50 % through the first pass' })).toBeVisible()
  expect(screen.getByText(/31 %, between 26 and 37 %/)).toBeVisible()
  expect(screen.getByRole('link', { name: 'What was not sent on' })).toHaveAttribute(
    'href',
    '/campaigns/n/candidates?state=not+sent+on',
  )
})

it('says that completeness is not known without a stamp, and nothing of it to a viewer', () => {
  const none = { lenses: 0, sentOn: 0, interval: null }
  const { unmount } = render(<FirstPassPart progress={progress} completeness={none} campaignPath="/c" passes={false} />)
  expect(screen.getByText(/What it misses is not known yet/)).toBeVisible()
  unmount()
  render(<FirstPassPart progress={progress} completeness={null} campaignPath="/c" passes={false} />)
  expect(screen.queryByText(/lenses|known/)).toBeNull()
  expect(screen.queryByRole('link')).toBeNull()
})

it('sends whether there is a first pass and who makes it', async () => {
  const sent: [FormDataEntryValue | null, FormDataEntryValue[]][] = []
  const action = async (_: object, form: FormData) => {
    sent.push([form.get('usesSheet'), form.getAll('passers')])
    return { done: 'Saved.' }
  }
  const graders = [
    { personId: 4, name: 'dunlin', passes: true },
    { personId: 5, name: 'plover', passes: false },
  ]
  render(<SheetForm choice={{ usesSheet: false, graders }} action={action} />)
  const user = userEvent.setup()
  await user.click(screen.getByRole('checkbox', { name: /A first pass over the sheet/ }))
  await user.click(screen.getByRole('checkbox', { name: 'plover' }))
  await user.click(screen.getByRole('button', { name: 'Save the first pass' }))
  expect(await screen.findByText('Saved.')).toBeVisible()
  expect(sent).toEqual([['on', ['4', '5']]])
})
