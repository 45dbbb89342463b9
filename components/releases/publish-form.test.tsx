import { fireEvent, render, screen } from '@testing-library/react'
import { expect, it } from 'vitest'
import { PublishForm } from './publish-form'
import type { PublishScreenProps } from './publish-screen'

function form(changes: Partial<PublishScreenProps['preview']> = {}) {
  const preview: PublishScreenProps['preview'] = {
    number: 2,
    confirmed: 3,
    setAside: 1,
    split: 0,
    open: 0,
    unjudged: 0,
    gradesSinceRun: 0,
    unplaced: [],
    before: 1,
    entered: [],
    enteredCount: 0,
    left: [],
    leftCount: 0,
    stamps: 0,
    cautions: { visual: 'Visual.', acronym: 'Registered.' },
    beingMade: null,
    correctable: [{ number: 1, title: 'One' }],
    last: null,
    ...changes,
  }
  render(
    <PublishForm
      home="/campaigns/north"
      campaign="North"
      survey="SWS"
      year={2026}
      licences={[{ id: 'CC-BY-4.0', name: 'Attribution' }]}
      preview={preview}
      kind="release"
      of={null}
      action={async () => ({
        message: 'Nothing was saved yet: see the marked fields.',
        errors: { cautionsRead: 'Tick that you have read both cautions.' },
      })}
    />,
  )
}

it('says of an erratum that changes no entry that it does, and of a retraction that it holds none', () => {
  form()
  expect(screen.queryByText(/No entry has come or gone/)).toBeNull()
  fireEvent.click(screen.getByLabelText('An erratum'))
  expect(screen.getByText(/No entry has come or gone since release 1/)).toBeInTheDocument()
  fireEvent.click(screen.getByLabelText('A retraction'))
  expect(screen.queryByText(/No entry has come or gone/)).toBeNull()
  expect(screen.getByText(/holds none of the candidates counted above/)).toBeInTheDocument()
})

it('says nothing of the kind where entries have come', () => {
  form({ entered: ['SWS J1'], enteredCount: 1 })
  fireEvent.click(screen.getByLabelText('An erratum'))
  expect(screen.queryByText(/No entry has come or gone/)).toBeNull()
})

it('marks the tick of the cautions where it is the field at fault', async () => {
  form()
  fireEvent.submit(screen.getByText(/Freeze release 2/).closest('form')!)
  expect(await screen.findByText('Tick that you have read both cautions.')).toBeInTheDocument()
  expect(screen.getByLabelText('I have read both.')).toHaveAttribute('aria-invalid', 'true')
})
