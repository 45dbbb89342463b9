import { createHash } from 'node:crypto'
import { mkdir, mkdtemp, readdir, rm, utimes, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { setImmediate } from 'node:timers/promises'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { BlobStore } from './blob-store'
import { syncFolder } from './sync-folder'

vi.mock(import('./sync-folder'), { spy: true })

/** FIPS 180-4, the 'abc' example of SHA-256. */
const ABC = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'

let folder: string
let store: BlobStore

beforeEach(async () => {
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-blobs-'))
  store = new BlobStore(path.join(folder, 'blobs'), path.join(folder, 'incoming'))
})
afterEach(async () => {
  vi.mocked(syncFolder).mockReset()
  await rm(folder, { recursive: true, force: true })
})

async function* chunks(...parts: string[]): AsyncGenerator<Uint8Array> {
  for (const part of parts) yield new TextEncoder().encode(part)
}

const leftovers = () => readdir(path.join(folder, 'incoming')).catch(() => [])

describe('BlobStore', () => {
  it('names bytes by their SHA-256 and gives them back', async () => {
    const blob = await store.put(new TextEncoder().encode('abc'))
    expect(blob.sha256).toBe(ABC)
    expect(blob.bytes).toBe(3)
    expect(Buffer.from(await store.read(blob.sha256)).toString()).toBe('abc')
    expect(await store.has(blob.sha256)).toBe(true)
  })

  it('gives a stream and a buffer of the same bytes the same name, and keeps one', async () => {
    const streamed = await store.putStream(chunks('a', 'b', 'c'))
    expect(await store.put(new TextEncoder().encode('abc'))).toEqual(streamed)
    expect(await leftovers()).toEqual([])
  })

  it('answers when the names of the blob and of the new folders above it are on disk too', async () => {
    const synced: string[] = []
    vi.mocked(syncFolder).mockImplementation(async (one) => {
      await setImmediate()
      expect(await store.has(ABC)).toBe(true)
      synced.push(path.relative(folder, one))
    })
    await store.putStream(chunks('abc'))
    expect(synced.sort()).toEqual(['', 'blobs', 'blobs/ba', 'blobs/ba/78'])
    await store.put(new TextEncoder().encode('abc'))
    expect(synced.slice(4)).toEqual(['blobs/ba/78'])
  })

  it('is not told to hold what could not be named on disk', async () => {
    vi.mocked(syncFolder).mockRejectedValue(new Error('no disk'))
    await expect(store.putStream(chunks('abc'))).rejects.toThrow('no disk')
    await expect(store.put(new TextEncoder().encode('abc'))).rejects.toThrow('no disk')
  })

  it('keeps nothing of a stream that breaks, so that half a file can never be taken for a whole one', async () => {
    async function* broken(): AsyncGenerator<Uint8Array> {
      yield new TextEncoder().encode('half')
      throw new Error('connection lost')
    }
    await expect(store.putStream(broken())).rejects.toThrow('connection lost')
    expect(await leftovers()).toEqual([])
    expect(await store.has(createHash('sha256').update('half').digest('hex'))).toBe(false)
  })

  it('keeps nothing of a stream that its reader refuses, and stops reading it', async () => {
    let read = 0
    async function* endless(): AsyncGenerator<Uint8Array> {
      for (;;) {
        read++
        yield new Uint8Array(1000)
      }
    }
    const tooMuch = store.putStream(endless(), (total) => {
      if (total > 5000) throw new RangeError('too much')
    })
    await expect(tooMuch).rejects.toThrow('too much')
    expect(read).toBe(6)
    expect(await leftovers()).toEqual([])
  })

  it('sweeps what a killed process left half written, and nothing that may still be written or is whole', async () => {
    const { sha256 } = await store.put(new TextEncoder().encode('abc'))
    await mkdir(path.join(folder, 'incoming'), { recursive: true })
    for (const [name, day] of [
      ['left', 1],
      ['at-work', 3],
    ] as const) {
      await writeFile(path.join(folder, 'incoming', name), 'half')
      await utimes(path.join(folder, 'incoming', name), new Date(2026, 0, day), new Date(2026, 0, day))
    }
    expect(await store.sweepTemporary(new Date(2026, 0, 2))).toBe(1)
    expect(await leftovers()).toEqual(['at-work'])
    expect(await store.has(sha256)).toBe(true)
  })

  it('has nothing to sweep where nothing was delivered yet', async () => {
    expect(await store.sweepTemporary(new Date())).toBe(0)
  })

  it.each(['../../etc/passwd', 'abc', ''])(
    'refuses %j as a name, so that no name reaches outside its folder',
    (name) => {
      expect(() => store.pathOf(name)).toThrow('Not a SHA-256 name')
    },
  )
})
