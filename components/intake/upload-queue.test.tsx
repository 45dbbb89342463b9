import { beforeEach, describe, expect, it, vi } from 'vitest'
import type { SentFile } from './send-file'
import { UploadQueue } from './upload-queue'

interface Sending {
  address: string
  resolve: (sent: SentFile) => void
  reject: (error: Error) => void
  onSent: (bytes: number) => void
}

let sending: Sending[]
let queue: UploadQueue
beforeEach(() => {
  sending = []
  queue = new UploadQueue(
    'north',
    (address, _file, onSent) =>
      new Promise((resolve, reject) => void sending.push({ address, resolve, reject, onSent })),
  )
})

const file = (name: string, bytes = 10) => ({ name, file: new File(['x'.repeat(bytes)], name) })
const settle = () => new Promise((resolve) => setTimeout(resolve, 0))

describe('the queue of uploads', () => {
  it('sends four at once, one file a request, folders and odd characters kept in the address', async () => {
    queue.add(['a b/1#.fits', '2', '3', '4', '5', '6'].map((name) => file(name)))
    expect(sending).toHaveLength(4)
    expect(sending[0].address).toBe('/api/campaigns/north/files/a%20b/1%23.fits')
    sending[1].resolve({ fate: 'stored' })
    await settle()
    expect(sending).toHaveLength(5)
  })

  it('counts bytes of files that are sent and of those under way', async () => {
    queue.add([file('1', 10), file('2', 20)])
    sending[0].resolve({ fate: 'stored' })
    await settle()
    sending[1].onSent(5)
    await vi.waitFor(() => expect(queue.getState()).toMatchObject({ bytes: 30, bytesSent: 15, done: 1, active: true }))
  })

  it('goes on after a failure, keeps its reason, and sends it again on demand', async () => {
    queue.add([file('1'), file('2')])
    sending[0].reject(new Error('The server has no room.'))
    sending[1].resolve({ fate: 'duplicate' })
    await settle()
    expect(queue.getState()).toMatchObject({ active: false, done: 1, duplicates: 1 })
    expect(queue.getState().failed).toMatchObject([{ name: '1', fault: 'The server has no room.' }])
    queue.retryFailed()
    expect(queue.getState()).toMatchObject({ active: true, failed: [] })
    sending[2].resolve({ fate: 'stored' })
    await settle()
    expect(queue.getState()).toMatchObject({ active: false, total: 2, done: 2, failed: [] })
  })

  it('counts a new delivery from nothing', async () => {
    queue.add([file('1')])
    sending[0].resolve({ fate: 'stored' })
    await settle()
    queue.add([file('2')])
    expect(queue.getState()).toMatchObject({ total: 1, done: 0 })
  })

  it('tells its listeners until they leave', async () => {
    const listener = vi.fn()
    const leave = queue.subscribe(listener)
    queue.add([file('1')])
    expect(listener).toHaveBeenCalled()
    leave()
    listener.mockClear()
    sending[0].resolve({ fate: 'stored' })
    await settle()
    expect(listener).not.toHaveBeenCalled()
  })
})
