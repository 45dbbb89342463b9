import { createHash } from 'node:crypto'
import { mkdirSync, renameSync, statSync, writeFileSync } from 'node:fs'
import { readFile, unlink } from 'node:fs/promises'
import path from 'node:path'

/**
 * Stamps on disk, in `aa/<sha256>` below one folder of their own: unlike blobs they can be made again from the cutouts, so a
 * backup may leave them out. They are renamed into place but not synced: syncing each costs 1.7 ms for a candidate's five
 * stamps on the machine where this was measured, as much as drawing them. A crash of the process loses nothing; a power cut
 * may, and then the hash does not agree when the stamp is read, and it is made again (serve-stamp.ts).
 */
const HASH = /^[0-9a-f]{64}$/

export function stampPath(folder: string, sha256: string): string {
  if (!HASH.test(sha256)) throw new Error(`Not a SHA-256 name: ${sha256}`)
  return path.join(folder, sha256.slice(0, 2), sha256)
}

const hashOf = (bytes: Uint8Array): string => createHash('sha256').update(bytes).digest('hex')

let serial = 0

/** Synchronous: it runs in a worker, where a trip through the thread pool takes longer than the write. */
export function putStamp(folder: string, bytes: Uint8Array): { sha256: string; bytes: number } {
  const sha256 = hashOf(bytes)
  const target = stampPath(folder, sha256)
  if (statSync(target, { throwIfNoEntry: false })?.size !== bytes.byteLength) {
    const temporary = `${target}.${process.pid}-${serial++}-${Math.trunc(performance.now())}`
    try {
      writeFileSync(temporary, bytes)
    } catch (error) {
      // Its folder is not there yet.
      if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error
      mkdirSync(path.dirname(target), { recursive: true })
      writeFileSync(temporary, bytes)
    }
    renameSync(temporary, target)
  }
  return { sha256, bytes: bytes.byteLength }
}

/** The bytes, or null when they are missing or damaged; damaged ones are removed so that they are made again. */
export async function readStamp(folder: string, sha256: string): Promise<Uint8Array<ArrayBuffer> | null> {
  const target = stampPath(folder, sha256)
  try {
    const bytes = await readFile(target)
    if (hashOf(bytes) === sha256) return bytes
    await unlink(target).catch(() => {})
    return null
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ENOENT') return null
    throw error
  }
}
