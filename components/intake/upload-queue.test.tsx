import { beforeEach, describe, expect, it, vi } from 'vitest'
import { SendFault, type SentFile } from './send-file'
import { UploadQueue } from './upload-queue'

interface Sending {
  address: string
  resolve: (sent: SentFile) => void
  reject: (error: Error) => void
  onSent: (bytes: number) => void
  signal: AbortSignal
}

let sending: Sending[]
let queue: UploadQueue
beforeEach(() => {
  sending = []
  queue = new UploadQueue(
    'north',
    (address, _file, onSent, signal) =>
      new Promise((resolve, reject) => void sending.push({ address, resolve, reject, onSent, signal })),
    async (file) => `hash of ${file.name}`,
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

  it('sends nothing again whose bytes are here, and sends what has changed', async () => {
    queue.add([
      { ...file('1'), known: 'hash of 1' },
      { ...file('2'), known: 'hash of an older 2' },
    ])
    await settle()
    expect(sending.map(({ address }) => address)).toEqual(['/api/campaigns/north/files/2'])
    sending[0].resolve({ fate: 'stored' })
    await settle()
    expect(queue.getState()).toMatchObject({ active: false, done: 2, duplicates: 1 })
  })

  it('begins no other file while it is paused, and goes on where it was', async () => {
    queue.add(['1', '2', '3', '4', '5'].map((name) => file(name)))
    queue.pause()
    sending[0].resolve({ fate: 'stored' })
    await settle()
    await vi.waitFor(() => expect(queue.getState()).toMatchObject({ paused: true, active: true, done: 1 }))
    expect(sending).toHaveLength(4)
    queue.goOn()
    expect(sending).toHaveLength(5)
    expect(queue.getState().paused).toBe(false)
  })

  it('drops what has not arrived when it is cancelled, and takes a new delivery after it', async () => {
    queue.add(['1', '2', '3', '4', '5', '6'].map((name) => file(name)))
    sending[0].resolve({ fate: 'stored' })
    await settle()
    queue.cancel()
    for (const { signal, reject } of sending.slice(1)) {
      expect(signal.aborted).toBe(true)
      reject(new SendFault('cancelled', 'Sending was cancelled.'))
    }
    await settle()
    expect(queue.getState()).toMatchObject({ active: false, done: 1, cancelled: 5, failed: [] })
    queue.add([file('7')])
    expect(sending.at(-1)?.signal.aborted).toBe(false)
    expect(queue.getState()).toMatchObject({ total: 1, cancelled: 0 })
  })

  it('waits for a lost connection and goes on by itself, without losing a file', async () => {
    vi.useFakeTimers()
    try {
      queue.add(['1', '2'].map((name) => file(name)))
      for (const { reject } of sending) reject(new SendFault('connection', 'The connection broke.'))
      await vi.advanceTimersByTimeAsync(200)
      expect(queue.getState()).toMatchObject({ stalled: true, active: true, failed: [] })
      await vi.advanceTimersByTimeAsync(3000)
      expect(sending).toHaveLength(4)
      for (const { resolve } of sending.slice(2)) resolve({ fate: 'stored' })
      await vi.advanceTimersByTimeAsync(200)
      expect(queue.getState()).toMatchObject({ stalled: false, active: false, done: 2, failed: [] })
    } finally {
      vi.useRealTimers()
    }
  })
})
