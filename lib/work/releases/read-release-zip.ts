import { createHash } from 'node:crypto'
import yauzl, { type Entry, type ZipFile } from 'yauzl'

/** Says what is wrong with a file that was taken for a release. */
export class NotARelease extends Error {
  override name = 'NotARelease'
}

/** Nothing that a release holds is near this; a larger member is no release's. */
const LARGEST_BYTES = 4 * 2 ** 30

/** The members of an archive on disk, each read when it is asked for. */
export class ReleaseZip {
  private constructor(
    private readonly zip: ZipFile,
    private readonly members: ReadonlyMap<string, Entry>,
  ) {}

  /** @throws NotARelease where it is none, is damaged, or a member is not what its checksum says. */
  static async open(path: string): Promise<ReleaseZip> {
    const zip = await yauzl.openPromise(path, { autoClose: false }).catch((cause: Error) => {
      if ((cause as NodeJS.ErrnoException).code === 'ENOENT') throw new NotARelease(`There is no file ${path}.`)
      throw new NotARelease(`${path} cannot be opened as a zip archive (${cause.message}). Download it again.`)
    })
    try {
      const release = new ReleaseZip(zip, await listMembers(zip))
      await release.checkSums()
      return release
    } catch (error) {
      zip.close()
      if (error instanceof NotARelease) throw error
      throw new NotARelease(`The archive is damaged: ${(error as Error).message}. Download it again.`)
    }
  }

  /** The bytes of a member as they are unpacked. @throws NotARelease without that member. */
  async *bytes(name: string): AsyncGenerator<Uint8Array, void, void> {
    const entry = this.members.get(name)
    if (!entry) throw new NotARelease(`The archive has no ${name}: it is no release, or a part of one.`)
    if (entry.uncompressedSize > LARGEST_BYTES) throw new NotARelease(`${name} is larger than any release's.`)
    const stream = await this.zip.openReadStreamPromise(entry)
    for await (const chunk of stream) yield chunk as Uint8Array
  }

  async text(name: string): Promise<string> {
    const decoder = new TextDecoder()
    let text = ''
    for await (const chunk of this.bytes(name)) text += decoder.decode(chunk, { stream: true })
    return text + decoder.decode()
  }

  close(): void {
    this.zip.close()
  }

  private async checkSums(): Promise<void> {
    const lines = (await this.text('SHA256SUMS')).split('\n').filter(Boolean)
    if (lines.length === 0) throw new NotARelease('SHA256SUMS is empty: the archive is no release.')
    const listed = new Set(['SHA256SUMS'])
    for (const line of lines) {
      const [, expected, name] = /^([0-9a-f]{64}) [ *](.+)$/.exec(line) ?? []
      if (!expected) throw new NotARelease(`SHA256SUMS has a line that is none of its kind: ${line.slice(0, 80)}`)
      const hash = createHash('sha256')
      for await (const chunk of this.bytes(name)) hash.update(chunk)
      if (hash.digest('hex') !== expected) {
        throw new NotARelease(
          `${name} is not the file that was released: its SHA-256 differs. Download the archive again.`,
        )
      }
      listed.add(name)
    }
    const stray = [...this.members.keys()].find((name) => !listed.has(name))
    if (stray) throw new NotARelease(`${stray} is in the archive and not in SHA256SUMS: somebody has added it.`)
  }
}

async function listMembers(zip: ZipFile): Promise<Map<string, Entry>> {
  const members = new Map<string, Entry>()
  for await (const entry of zip.eachEntry()) members.set(entry.fileName, entry)
  return members
}
