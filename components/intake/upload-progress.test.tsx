import { render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { describe, expect, it, vi } from 'vitest'
import { DropZone } from './drop-zone'
import { UploadProgress } from './upload-progress'
import type { UploadState } from './upload-queue'

const state = (change: Partial<UploadState>): UploadState => ({
  total: 36,
  done: 0,
  duplicates: 0,
  bytes: 1000,
  bytesSent: 0,
  sending: [],
  failed: [],
  active: false,
  paused: false,
  stalled: false,
  cancelled: 0,
  ...change,
})

const brakes = () => ({ retryFailed: vi.fn(), pause: vi.fn(), goOn: vi.fn(), cancel: vi.fn() })

describe('the progress of uploads', () => {
  it('is nothing before anything is sent', () => {
    const { container } = render(<UploadProgress state={state({ total: 0 })} left={[]} queue={brakes()} />)
    expect(container).toBeEmptyDOMElement()
  })

  it('shows the whole and each file under way', () => {
    const sending = [{ id: 1, name: 'SWS1_g.fits', bytes: 200, sent: 50, fault: null }]
    render(
      <UploadProgress state={state({ active: true, done: 4, bytesSent: 250, sending })} left={[]} queue={brakes()} />,
    )
    expect(screen.getByRole('status')).toHaveTextContent('Sending: 4 of 36 files are on the server.')
    expect(screen.getByRole('progressbar', { name: 'Files sent' })).toHaveAttribute('aria-valuenow', '25')
    expect(screen.getByRole('progressbar', { name: 'SWS1_g.fits' })).toHaveAttribute('aria-valuenow', '25')
  })

  it('names what did not arrive and why, and sends it again on a click', async () => {
    const queue = brakes()
    const failed = [{ id: 1, name: 'SWS1_g.fits', bytes: 1, sent: 0, fault: 'The connection broke.' }]
    render(<UploadProgress state={state({ done: 35, failed })} left={[]} queue={queue} />)
    expect(screen.getByRole('alert')).toHaveTextContent('SWS1_g.fits: The connection broke.')
    await userEvent.click(screen.getByRole('button', { name: 'Send them again' }))
    expect(queue.retryFailed).toHaveBeenCalledOnce()
  })

  it('has brakes while it sends, and says when the connection is lost', async () => {
    const queue = brakes()
    const { rerender } = render(<UploadProgress state={state({ active: true })} left={[]} queue={queue} />)
    await userEvent.click(screen.getByRole('button', { name: 'Pause sending' }))
    await userEvent.click(screen.getByRole('button', { name: 'Cancel sending' }))
    expect(queue.pause).toHaveBeenCalledOnce()
    expect(queue.cancel).toHaveBeenCalledOnce()
    rerender(<UploadProgress state={state({ active: true, paused: true })} left={[]} queue={queue} />)
    await userEvent.click(screen.getByRole('button', { name: 'Go on sending' }))
    expect(queue.goOn).toHaveBeenCalledOnce()
    rerender(<UploadProgress state={state({ active: true, stalled: true })} left={[]} queue={queue} />)
    expect(screen.getByRole('status')).toHaveTextContent('The connection is lost: 0 of 36 files are on the server.')
    rerender(<UploadProgress state={state({ done: 5, cancelled: 31 })} left={[]} queue={queue} />)
    expect(screen.queryByRole('button')).toBeNull()
    expect(screen.getByRole('status')).toHaveTextContent('5 files sent; 31 not sent because sending was cancelled.')
  })

  it('says how many were here before', () => {
    render(<UploadProgress state={state({ done: 36, duplicates: 2 })} left={[]} queue={brakes()} />)
    expect(screen.getByRole('status')).toHaveTextContent('36 files sent, 2 of them here before.')
  })
})

describe('the place to send files', () => {
  it('hands on what was chosen and can be given the same again', async () => {
    const onChosen = vi.fn()
    render(<DropZone onChosen={onChosen} />)
    const input = screen.getByLabelText('Files to send')
    for (const times of [1, 2]) {
      await userEvent.upload(input, new File(['x'], 'SWS1_g.fits'))
      expect(onChosen).toHaveBeenCalledTimes(times)
    }
    expect(onChosen.mock.calls[0][0].files).toMatchObject([{ name: 'SWS1_g.fits' }])
  })

  it('opens by keyboard', async () => {
    render(<DropZone onChosen={() => {}} />)
    const click = vi.spyOn(screen.getByLabelText('Files to send'), 'click')
    await userEvent.tab()
    await userEvent.keyboard('{Enter}')
    expect(click).toHaveBeenCalledOnce()
  })

  it('has the focus when it comes back after a look at matches, and does not take it when the page opens', () => {
    const { unmount } = render(<DropZone onChosen={() => {}} />)
    expect(document.body).toHaveFocus()
    unmount()
    render(<DropZone onChosen={() => {}} isBack />)
    expect(screen.getByRole('button', { name: 'Choose files' })).toHaveFocus()
  })
})
