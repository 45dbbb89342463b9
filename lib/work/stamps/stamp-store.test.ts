import { createHash, randomBytes } from 'node:crypto'
import * as fs from 'node:fs'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { headOfPack, MOST_STAMPS, packOf } from './stamp-pack'
import { putStamp, readStamp, stampPath, StampWriter } from './stamp-store'

// So that one call can be made to fail.
vi.mock('node:fs', async (load) => ({ ...(await load<typeof fs>()) }))

let folder: string
beforeEach(() => (folder = fs.mkdtempSync(path.join(tmpdir(), 'ringside-stamps-'))))
afterEach(() => {
  vi.restoreAllMocks()
  fs.rmSync(folder, { recursive: true, force: true })
})

const stamp = () => new Uint8Array(randomBytes(500))
const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex')
const left = () => (fs.existsSync(path.join(folder, 'incoming')) ? fs.readdirSync(path.join(folder, 'incoming')) : [])

function write(stamps: Uint8Array[]): void {
  const writer = new StampWriter(folder)
  for (const bytes of stamps) expect(writer.add(bytes)).toEqual({ sha256: sha256(bytes), bytes: bytes.length })
  writer.write()
}

const failing = (code: string) => () => {
  throw Object.assign(new Error(code), { code })
}

describe('stamps that are written together', () => {
  it('are read each by its hash, and are one file', async () => {
    const stamps = [stamp(), stamp(), stamp()]
    write([...stamps, stamps[0]])
    for (const bytes of stamps) expect(await readStamp(folder, sha256(bytes))).toEqual(bytes)
    expect(new Set(stamps.map((bytes) => fs.statSync(stampPath(folder, sha256(bytes))).ino)).size).toBe(1)
    expect(left()).toEqual([])
  })

  it('are on disk from the writing on, however many', async () => {
    const stamps = Array.from({ length: MOST_STAMPS + 1 }, stamp)
    const writer = new StampWriter(folder)
    for (const bytes of stamps) writer.add(bytes)
    const last = sha256(stamps[MOST_STAMPS])
    expect(await readStamp(folder, sha256(stamps[0]))).toEqual(stamps[0])
    expect(await readStamp(folder, last)).toBeNull()
    writer.write()
    expect(await readStamp(folder, last)).toEqual(stamps[MOST_STAMPS])
  })

  it('leave those alone that are there already, also as files of their own', async () => {
    const [old, fresh] = [stamp(), stamp()]
    fs.mkdirSync(path.dirname(stampPath(folder, sha256(old))), { recursive: true })
    fs.writeFileSync(stampPath(folder, sha256(old)), old)
    write([old, fresh])
    expect(fs.readFileSync(stampPath(folder, sha256(old)))).toEqual(Buffer.from(old))
    expect(await readStamp(folder, sha256(old))).toEqual(old)
    expect(await readStamp(folder, sha256(fresh))).toEqual(fresh)
  })

  it('are named anew where their names lead nowhere', async () => {
    const stamps = [stamp(), stamp()]
    write(stamps)
    fs.rmSync(path.join(folder, 'packs'), { recursive: true })
    expect(await readStamp(folder, sha256(stamps[0]))).toBeNull()
    write(stamps)
    for (const bytes of stamps) expect(await readStamp(folder, sha256(bytes))).toEqual(bytes)
  })

  it('are held once by a copy of the folder', async () => {
    const stamps = [stamp(), stamp(), stamp()]
    write(stamps)
    const copy = `${folder}-copy`
    try {
      fs.cpSync(folder, copy, { recursive: true, verbatimSymlinks: true })
      for (const bytes of stamps) expect(await readStamp(copy, sha256(bytes))).toEqual(bytes)
      const files = fs.readdirSync(copy, { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile())
      expect(files).toHaveLength(1)
    } finally {
      fs.rmSync(copy, { recursive: true, force: true })
    }
  })

  it.each(['EPERM', 'ENOTSUP', 'ENOSYS'])('are files of their own where names of one file end in %s', async (code) => {
    const stamps = [stamp(), stamp()]
    vi.spyOn(fs, 'symlinkSync').mockImplementation(failing(code))
    write(stamps)
    for (const bytes of stamps) expect(await readStamp(folder, sha256(bytes))).toEqual(bytes)
    expect(left()).toEqual([])
  })

  it('are refused with the reason of a full disk, of which nothing stays', () => {
    vi.spyOn(fs, 'symlinkSync').mockImplementation(failing('ENOSPC'))
    vi.spyOn(fs, 'writeFileSync').mockImplementation(failing('ENOSPC'))
    expect(() => write([stamp()])).toThrow('ENOSPC')
    expect(left()).toEqual([])
  })
})

describe('a stamp', () => {
  it('that is damaged in its file is given up alone, and can be put again', async () => {
    const stamps = [stamp(), stamp()]
    write(stamps)
    const target = stampPath(folder, sha256(stamps[1]))
    const pack = fs.readFileSync(target)
    pack[pack.length - 1] ^= 1
    fs.writeFileSync(target, pack)
    expect(await readStamp(folder, sha256(stamps[1]))).toBeNull()
    expect(fs.existsSync(target)).toBe(false)
    expect(await readStamp(folder, sha256(stamps[0]))).toEqual(stamps[0])
    putStamp(folder, stamps[1])
    expect(await readStamp(folder, sha256(stamps[1]))).toEqual(stamps[1])
  })

  it.each([0, 3, 20, 90])('of a file that ends after %s bytes is none', async (bytes) => {
    const { sha256: hash } = putStamp(folder, stamp())
    fs.truncateSync(stampPath(folder, hash), bytes)
    expect(await readStamp(folder, hash)).toBeNull()
  })

  it('under a name that is no hash is not asked of the disk', async () => {
    await expect(readStamp(folder, '../../etc/passwd')).rejects.toThrow('Not a SHA-256 name')
    expect(await readStamp(folder, 'f'.repeat(64))).toBeNull()
  })
})

describe('a file of stamps', () => {
  it('is none when it says more entries than it has, or begins otherwise', () => {
    const bytes = stamp()
    const file = packOf([[sha256(bytes), bytes]])
    expect(headOfPack(file)).toHaveLength(40)
    expect(headOfPack(file.subarray(0, 47))).toBeNull()
    expect(headOfPack(Uint8Array.from([...file.slice(0, 4), 255, 255, 255, 255, ...file.slice(8)]))).toBeNull()
    expect(headOfPack(Uint8Array.from([137, 80, 78, 71, 13, 10, 26, 10]))).toBeNull()
    expect(() => packOf(Array.from({ length: MOST_STAMPS + 1 }, () => [sha256(bytes), bytes] as const))).toThrow(
      RangeError,
    )
  })
})
