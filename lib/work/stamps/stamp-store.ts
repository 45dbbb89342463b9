import { createHash, randomUUID } from 'node:crypto'
import { existsSync, mkdirSync, renameSync, rmSync, symlinkSync, writeFileSync } from 'node:fs'
import { open, readFile, unlink } from 'node:fs/promises'
import path from 'node:path'
import { threadId } from 'node:worker_threads'
import { findInPack, headOfPack, LONGEST_HEAD, MOST_STAMPS, packOf } from './stamp-pack'

/**
 * Stamps on disk, each under the name `aa/<sha256>` below one folder of their own: unlike blobs they can be made again from the
 * cutouts, so a backup may leave them out.
 *
 * Those of a task are written together into one file below `packs/` (stamp-pack.ts), to which each stamp's name is a symbolic link,
 * because making a file costs several times what drawing a stamp does once other work keeps the disk busy: 25 microseconds of
 * processor time and 0.1 to 1.2 ms each for files of their own, 7 to 12 and 0.05 ms for a link (ext4, measured together). Not hard
 * links: a copy that does not know them, such as `cp -r`, would hold the file once for each of its stamps. A name is given only to
 * a file that is whole. Nothing is synced. A crash of the process loses nothing; a power cut may, and then the hash does not
 * agree when the stamp is read, and it is made again (serve-stamp.ts).
 */
const HASH = /^[0-9a-f]{64}$/
/** A task's stamps are written in parts of about this size. */
const MOST_BYTES = 16 * 1024 * 1024

export function stampPath(folder: string, sha256: string): string {
  if (!HASH.test(sha256)) throw new Error(`Not a SHA-256 name: ${sha256}`)
  return path.join(folder, sha256.slice(0, 2), sha256)
}

const hashOf = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex')

const codeOf = (error: unknown): string => (error as NodeJS.ErrnoException).code ?? ''

let serial = 0

/** Stamps that are to be written together. Synchronous: a trip through the thread pool takes longer than a write. */
export class StampWriter {
  readonly #waiting = new Map<string, Uint8Array>()
  #bytes = 0
  constructor(private readonly folder: string) {}

  /** On disk only after `write`. */
  add(bytes: Uint8Array): { sha256: string; bytes: number } {
    const sha256 = hashOf(bytes)
    if (!this.#waiting.has(sha256)) {
      this.#waiting.set(sha256, bytes)
      this.#bytes += bytes.byteLength
      if (this.#bytes > MOST_BYTES || this.#waiting.size === MOST_STAMPS) this.write()
    }
    return { sha256, bytes: bytes.byteLength }
  }

  write(): void {
    const fresh = [...this.#waiting].filter(([sha256]) => !existsSync(stampPath(this.folder, sha256)))
    if (fresh.length > 0) writePack(this.folder, fresh)
    this.#waiting.clear()
    this.#bytes = 0
  }
}

/** One stamp by itself. */
export function putStamp(folder: string, bytes: Uint8Array): { sha256: string; bytes: number } {
  const writer = new StampWriter(folder)
  const stored = writer.add(bytes)
  writer.write()
  return stored
}

function writePack(folder: string, stamps: readonly (readonly [string, Uint8Array])[]): void {
  const temporary = path.join(
    folder,
    'incoming',
    `${process.pid}-${threadId}-${serial++}-${Math.trunc(performance.now())}`,
  )
  const pack = randomUUID()
  const file = path.join(folder, 'packs', pack.slice(0, 2), pack)
  try {
    inFolder(temporary, () => writeFileSync(temporary, packOf(stamps), { flag: 'wx' }))
    inFolder(file, () => renameSync(temporary, file))
    for (const [sha256] of stamps) name(path.join('..', 'packs', pack.slice(0, 2), pack), stampPath(folder, sha256))
  } catch (error) {
    // File systems without symbolic links, and those that are full: which, the copies show.
    if (codeOf(error) === '') throw error
    for (const [sha256, bytes] of stamps) writeAlone(stampPath(folder, sha256), `${temporary}-alone`, bytes)
  } finally {
    rmSync(temporary, { force: true })
  }
}

/** @param file as seen from the target's folder */
function name(file: string, target: string): void {
  try {
    inFolder(target, () => symlinkSync(file, target))
  } catch (error) {
    if (codeOf(error) !== 'EEXIST') throw error
    // Somebody was quicker, and whether what is there is whole is seen when it is read; or the name leads nowhere.
    if (existsSync(target)) return
    rmSync(target, { force: true })
    symlinkSync(file, target)
  }
}

function writeAlone(target: string, temporary: string, bytes: Uint8Array): void {
  if (existsSync(target)) return
  writeFileSync(temporary, bytes)
  inFolder(target, () => renameSync(temporary, target))
}

/** Does it, after making the file's folder where that is what is missing. */
function inFolder(file: string, work: () => void): void {
  try {
    work()
  } catch (error) {
    if (codeOf(error) !== 'ENOENT') throw error
    mkdirSync(path.dirname(file), { recursive: true })
    work()
  }
}

/** The bytes, or null when they are missing or damaged; the name of damaged ones is removed so that they are made again. */
export async function readStamp(folder: string, sha256: string): Promise<Uint8Array<ArrayBuffer> | null> {
  const target = stampPath(folder, sha256)
  try {
    const bytes = await readNamed(target, sha256)
    if (bytes !== null && hashOf(bytes) === sha256) return bytes
    await unlink(target).catch(() => {})
    return null
  } catch (error) {
    if (codeOf(error) === 'ENOENT') return null
    throw error
  }
}

/** Out of a pack, or the whole of a file that holds one stamp; null where a pack does not have it. */
async function readNamed(target: string, sha256: string): Promise<Uint8Array<ArrayBuffer> | null> {
  const file = await open(target, 'r')
  try {
    const start = new Uint8Array(LONGEST_HEAD)
    const { bytesRead } = await file.read(start, 0, LONGEST_HEAD, 0)
    const head = headOfPack(start.subarray(0, bytesRead))
    if (head === null) return new Uint8Array(await readFile(target))
    const place = findInPack(head, sha256)
    if (place === null) return null
    const bytes = new Uint8Array(place.length)
    const found = await file.read(bytes, 0, place.length, place.offset)
    return found.bytesRead === place.length ? bytes : null
  } finally {
    await file.close()
  }
}
