import { crc32 } from 'node:zlib'
import yauzl from 'yauzl'
import { overLimit, type ArchiveLimits } from './archive-limits'
import { isManifestName } from '../file-name'
import {
  encrypted,
  unsafe,
  unsafeName,
  type ArchiveMember,
  type ArchiveReader,
  type ArchiveScan,
  type LostMember,
} from './archive-member'

/** Who wrote the attributes (APPNOTE 4.4.2): only these mean a Unix file mode in their upper half. */
const UNIX_MAKERS = [3, 19]
const STORED = 0
const DEFLATED = 8

/** What is no plain file (POSIX st_mode), by its type bits. */
const ODD_TYPES: Record<number, string> = {
  0o120000: 'a link',
  0o020000: 'a device',
  0o060000: 'a device',
  0o010000: 'a pipe',
  0o140000: 'a socket',
}

/**
 * A ZIP archive by its central directory (PKWARE APPNOTE 6.3), read anew for each pass so that no list of it is held. yauzl
 * checks sizes and leaves names to us: what points outside is refused before anything is unpacked. CRC-32 is checked here.
 */
export function zipReader(path: string, packedBytes: number, limits: ArchiveLimits): ArchiveReader {
  return {
    /** @throws Error where there is no central directory: cut off, or no ZIP. */
    scan: () => scanDirectory(path, packedBytes, limits),
    async *members() {
      // Manifests first, so that they are known when files are matched.
      yield* zipMembers(path, isManifestName)
      yield* zipMembers(path, (name) => !isManifestName(name))
    },
  }
}

const open = (path: string, validateEntrySizes: boolean) =>
  yauzl.openPromise(path, { decodeStrings: false, validateEntrySizes, autoClose: false })

const nameOf = (entry: yauzl.Entry): string =>
  yauzl.getFileNameLowLevel(entry.generalPurposeBitFlag, entry.fileNameRaw, entry.extraFields, true)

async function scanDirectory(path: string, packedBytes: number, limits: ArchiveLimits): Promise<ArchiveScan> {
  // Sizes are compared below: yauzl would call a member of wrong sizes damaged before it could be told that it is encrypted.
  const zip = await open(path, false)
  let members = 0
  let bytes = 0
  try {
    const many = overLimit(limits, { members: zip.entryCount, bytes, packedBytes })
    if (many) return { refusal: many, members }
    for await (const entry of zip.eachEntry()) {
      const name = nameOf(entry)
      bytes += entry.uncompressedSize
      if (!name.endsWith('/')) members++
      const refusal =
        unsafeName(name) ??
        oddType(entry, name) ??
        (entry.isEncrypted() ? encrypted(name) : null) ??
        overLimit(limits, { members, bytes, packedBytes })
      if (refusal) return { refusal, members }
      if (entry.compressionMethod === STORED && entry.compressedSize !== entry.uncompressedSize) {
        throw new Error(`The sizes of '${name}' do not agree`)
      }
    }
    return { refusal: null, members }
  } finally {
    zip.close()
  }
}

function oddType(entry: yauzl.Entry, name: string) {
  if (!UNIX_MAKERS.includes(entry.versionMadeBy >>> 8)) return null
  const type = ODD_TYPES[(entry.externalFileAttributes >>> 16) & 0o170000]
  return type === undefined ? null : unsafe(name, `which is ${type} and no file`)
}

async function* zipMembers(
  path: string,
  isWanted: (name: string) => boolean,
): AsyncGenerator<ArchiveMember | LostMember, void, void> {
  const zip = await open(path, true)
  try {
    for await (const entry of zip.eachEntry()) {
      const name = nameOf(entry).replaceAll('\\', '/')
      if (name.endsWith('/') || !isWanted(name)) continue
      if (entry.compressionMethod !== STORED && entry.compressionMethod !== DEFLATED) {
        yield { lost: `'${name}' is packed by method ${entry.compressionMethod}, which is not read here.`, rest: false }
      } else yield { name, chunks: checked(zip, entry, name) }
    }
  } finally {
    zip.close()
  }
}

async function* checked(zip: yauzl.ZipFile, entry: yauzl.Entry, name: string): AsyncGenerator<Uint8Array> {
  const stream = await zip.openReadStreamPromise(entry)
  let sum = 0
  for await (const chunk of stream as AsyncIterable<Buffer>) {
    sum = crc32(chunk, sum)
    yield chunk
  }
  if (sum !== entry.crc32) throw new Error(`The checksum of '${name}' is not that of its bytes`)
}
