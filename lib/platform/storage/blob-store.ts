import { createHash, randomUUID } from 'node:crypto'
import { constants, createReadStream, type ReadStream } from 'node:fs'
import { access, mkdir, open, readdir, readFile, rename, stat, unlink, type FileHandle } from 'node:fs/promises'
import path from 'node:path'
import { syncFolder } from './sync-folder'

/**
 * Blobs named by the SHA-256 of their bytes, in `aa/bb/<hash>` below one folder. A blob is written under a temporary name,
 * synced and renamed, and its name is synced too: a name that exists has all of its bytes, and a blob that was put is there
 * under its name, whatever happened to process and machine. The database row that names it comes after.
 */
export interface StoredBlob {
  sha256: string
  bytes: number
}

export class BlobStore {
  readonly #madeFolders = new Set<string>()
  /** Folders whose own names are on disk. */
  readonly #syncedFolders = new Set<string>()
  constructor(
    private readonly folder: string,
    private readonly temporaryFolder: string,
  ) {}

  pathOf(sha256: string): string {
    if (!/^[0-9a-f]{64}$/.test(sha256)) throw new Error(`Not a SHA-256 name: ${sha256}`)
    return path.join(this.folder, sha256.slice(0, 2), sha256.slice(2, 4), sha256)
  }

  async has(sha256: string): Promise<boolean> {
    return access(this.pathOf(sha256), constants.R_OK).then(
      () => true,
      () => false,
    )
  }

  async put(bytes: Uint8Array): Promise<StoredBlob> {
    const sha256 = createHash('sha256').update(bytes).digest('hex')
    if (await this.has(sha256)) {
      // Who is putting it at the same time may not have come so far.
      await this.syncName(this.pathOf(sha256))
    } else {
      const { temporary, handle } = await this.openTemporary()
      try {
        await handle.writeFile(bytes)
        await handle.sync()
      } finally {
        await handle.close()
      }
      await this.adopt(temporary, sha256)
    }
    return { sha256, bytes: bytes.byteLength }
  }

  /**
   * Streams to disk while hashing, holding one chunk at a time. `onBytes` sees the running count and may throw to refuse the
   * rest; nothing is left behind then, nor when the stream breaks.
   */
  async putStream(chunks: AsyncIterable<Uint8Array>, onBytes: (total: number) => void = () => {}): Promise<StoredBlob> {
    const { temporary, handle } = await this.openTemporary()
    const hash = createHash('sha256')
    let total = 0
    try {
      for await (const chunk of chunks) {
        total += chunk.byteLength
        onBytes(total)
        hash.update(chunk)
        await handle.writeFile(chunk)
      }
      await handle.sync()
      await handle.close()
    } catch (error) {
      await handle.close().catch(() => {})
      await unlink(temporary).catch(() => {})
      throw error
    }
    const sha256 = hash.digest('hex')
    await this.adopt(temporary, sha256)
    return { sha256, bytes: total }
  }

  async read(sha256: string): Promise<Uint8Array> {
    return readFile(this.pathOf(sha256))
  }

  async size(sha256: string): Promise<number> {
    return (await stat(this.pathOf(sha256))).size
  }

  stream(sha256: string): ReadStream {
    return createReadStream(this.pathOf(sha256))
  }

  /** Removes what a killed process left half written: temporary files not written to since `before`. Returns how many. */
  async sweepTemporary(before: Date): Promise<number> {
    const names = await readdir(this.temporaryFolder).catch(() => [])
    let removed = 0
    for (const name of names) {
      const temporary = path.join(this.temporaryFolder, name)
      // Another process may adopt or remove it at the same moment.
      const found = await stat(temporary).catch(() => null)
      if (!found?.isFile() || found.mtime >= before) continue
      removed += await unlink(temporary).then(
        () => 1,
        () => 0,
      )
    }
    return removed
  }

  private async openTemporary(): Promise<{ temporary: string; handle: FileHandle }> {
    const temporary = path.join(this.temporaryFolder, randomUUID())
    return { temporary, handle: await this.inFolder(this.temporaryFolder, () => open(temporary, 'wx')) }
  }

  private async adopt(temporary: string, sha256: string): Promise<void> {
    const target = this.pathOf(sha256)
    await this.inFolder(path.dirname(target), () => rename(temporary, target))
    await this.syncName(target)
  }

  /** The name of a blob, and once those of the folders above it. */
  private async syncName(blob: string): Promise<void> {
    const leaf = path.dirname(blob)
    const fresh = [leaf, path.dirname(leaf), this.folder].filter((folder) => !this.#syncedFolders.has(folder))
    await Promise.all([leaf, ...fresh.map((folder) => path.dirname(folder))].map(syncFolder))
    for (const folder of fresh) this.#syncedFolders.add(folder)
  }

  /** Makes the folder once, and again where somebody has removed it since. */
  private async inFolder<T>(folder: string, work: () => Promise<T>): Promise<T> {
    if (this.#madeFolders.has(folder)) {
      try {
        return await work()
      } catch (error) {
        if ((error as NodeJS.ErrnoException).code !== 'ENOENT') throw error
      }
    }
    if ((await mkdir(folder, { recursive: true })) !== undefined) this.#syncedFolders.clear()
    this.#madeFolders.add(folder)
    return work()
  }
}
