import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { expect, it, vi } from 'vitest'
import { BatchControls } from './batch-controls'

it('brakes a batch that is being read, has a paused one go on, and is nothing without one', async () => {
  const onControl = vi.fn()
  const batches = [
    { id: 2, name: 'Night 2', state: 'open' as const, waiting: 1200 },
    { id: 1, name: 'Night 1', state: 'paused' as const, waiting: 0 },
  ]
  const { container, rerender } = render(<BatchControls batches={batches} onControl={onControl} />)
  expect(screen.getByText('Night 2: 1,200 files wait')).toBeInTheDocument()
  await userEvent.click(screen.getByRole('button', { name: 'Pause reading' }))
  await userEvent.click(screen.getByRole('button', { name: 'Go on reading' }))
  const [cancel, nothingToCancel] = screen.getAllByRole('button', { name: 'Cancel reading' })
  await userEvent.click(cancel)
  expect(nothingToCancel).toBeDisabled()
  expect(onControl.mock.calls).toEqual([
    [2, 'pause'],
    [1, 'go on'],
    [2, 'cancel'],
  ])
  rerender(<BatchControls batches={[]} onControl={onControl} />)
  expect(container).toBeEmptyDOMElement()
})
