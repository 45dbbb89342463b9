import { createReadStream } from 'node:fs'
import type { Readable } from 'node:stream'
import { createGunzip } from 'node:zlib'
import tar from 'tar-stream'
import { overLimit, type ArchiveLimits } from './archive-limits'
import { unsafe, unsafeName, type ArchiveMember, type ArchiveReader, type LostMember } from './archive-member'

/** What is no plain file (POSIX ustar typeflag), in words. */
const ODD_TYPES: Record<string, string> = {
  link: 'a link',
  symlink: 'a link',
  'character-device': 'a device',
  'block-device': 'a device',
  fifo: 'a pipe',
}

/** Sparse and other types of GNU's and others' own, of which the bytes are not the file's. */
const isPlain = (type: string | null | undefined): boolean => type === 'file' || type === 'contiguous-file'

/**
 * A tar archive, plain or packed by gzip. It has no directory: it is gone through once to see whether all of it may be taken and
 * once more to take it. Where it breaks off, what came before stands.
 */
export function tarReader(path: string, packedBytes: number, isGzip: boolean, limits: ArchiveLimits): ArchiveReader {
  return {
    async scan() {
      let members = 0
      let bytes = 0
      const { entries, source, close } = openTar(path, isGzip)
      let unpacked = 0
      source.on('data', (chunk: Buffer) => (unpacked += chunk.byteLength))
      try {
        for await (const entry of entries) {
          const { name, type, size } = entry.header
          if (type !== 'directory') members++
          bytes = Math.max(bytes + (size ?? 0), unpacked)
          const odd = ODD_TYPES[type ?? '']
          const refusal =
            unsafeName(name) ??
            (odd === undefined ? null : unsafe(name, `which is ${odd} and no file`)) ??
            overLimit(limits, { members, bytes, packedBytes })
          if (refusal) return { refusal, members }
          entry.resume()
        }
      } catch {
        // The second pass meets the same damage, and says what is lost.
      } finally {
        close()
      }
      return { refusal: null, members }
    },
    members: () => tarMembers(path, isGzip),
  }
}

function openTar(path: string, isGzip: boolean) {
  const entries = tar.extract()
  const file = createReadStream(path)
  const source: Readable = isGzip ? createGunzip() : file
  const fail = (error: Error) => entries.destroy(error)
  file.on('error', fail)
  if (source !== file) file.pipe(source as ReturnType<typeof createGunzip>).on('error', fail)
  source.pipe(entries)
  const close = () => {
    file.destroy()
    source.destroy()
    entries.destroy()
  }
  return { entries, source, close }
}

async function* tarMembers(path: string, isGzip: boolean): AsyncGenerator<ArchiveMember | LostMember, void, void> {
  const { entries, close } = openTar(path, isGzip)
  let last: string | null = null
  try {
    for await (const entry of entries) {
      const { name, type } = entry.header
      if (isPlain(type)) yield { name, chunks: entry as AsyncIterable<Buffer> }
      else if (type !== 'directory') {
        yield { lost: `'${name}' is of a kind (${type ?? 'unknown'}) that is no plain file.`, rest: false }
      }
      last = name
      entry.resume()
    }
  } catch (error) {
    const why = error instanceof Error ? error.message : String(error)
    const after = last === null ? 'Nothing of it is whole' : `What came after '${last}' is lost`
    yield { lost: `The archive is damaged or cut off. ${after} (${why}).`, rest: true }
  } finally {
    close()
  }
}
