import { createReadStream } from 'node:fs'
import { open, type FileHandle } from 'node:fs/promises'
import { crc32, createInflateRaw } from 'node:zlib'
import { overLimit, type ArchiveLimits } from './archive-limits'
import { encrypted, unsafeName, type ArchiveMember, type ArchiveReader, type LostMember } from './archive-member'

const LOCAL_HEADER = 0x04034b50
const HEADER_BYTES = 30

interface LocalMember {
  name: string
  method: number
  crc: number
  packedBytes: number
  bytes: number
  dataStart: number
  isEncrypted: boolean
}

/**
 * A ZIP archive whose directory is lost, because it was cut off: its whole members by their own headers (PKWARE APPNOTE 4.3.7),
 * as far as these tell sizes. An archive that was written as a stream (bit 3 of its flags) tells them too late to be followed.
 */
export function cutZipReader(path: string, fileBytes: number, limits: ArchiveLimits): ArchiveReader {
  return {
    async scan() {
      let members = 0
      let bytes = 0
      for await (const member of localMembers(path, fileBytes)) {
        bytes += member.bytes
        if (!member.name.endsWith('/')) members++
        const refusal =
          unsafeName(member.name) ??
          (member.isEncrypted ? encrypted(member.name) : null) ??
          overLimit(limits, { members, bytes, packedBytes: fileBytes })
        if (refusal) return { refusal, members }
      }
      return { refusal: null, members }
    },
    async *members(): AsyncGenerator<ArchiveMember | LostMember, void, void> {
      let last = ''
      for await (const member of localMembers(path, fileBytes)) {
        last = member.name
        if (!member.name.endsWith('/')) yield { name: member.name, chunks: bytesOf(path, member) }
      }
      yield {
        lost:
          last === ''
            ? 'The archive is cut off or damaged, and none of its files can be found whole. Send it again.'
            : `The archive is cut off: what came after '${last}' is lost.`,
        rest: true,
      }
    },
  }
}

async function* localMembers(path: string, fileBytes: number): AsyncGenerator<LocalMember> {
  const file = await open(path, 'r')
  try {
    for (let at = 0; ;) {
      const member = await readHeader(file, at)
      if (!member || member.dataStart + member.packedBytes > fileBytes) return
      yield member
      at = member.dataStart + member.packedBytes
    }
  } finally {
    await file.close()
  }
}

async function readHeader(file: FileHandle, at: number): Promise<LocalMember | null> {
  const head = Buffer.alloc(HEADER_BYTES)
  const { bytesRead } = await file.read(head, 0, HEADER_BYTES, at)
  if (bytesRead < HEADER_BYTES || head.readUInt32LE(0) !== LOCAL_HEADER) return null
  const flags = head.readUInt16LE(6)
  const method = head.readUInt16LE(8)
  const isFollowable = (flags & 0b1000) === 0 && (method === 0 || method === 8)
  const nameBytes = head.readUInt16LE(26)
  const name = Buffer.alloc(nameBytes)
  const read = await file.read(name, 0, nameBytes, at + HEADER_BYTES)
  const [packedBytes, bytes] = [head.readUInt32LE(18), head.readUInt32LE(22)]
  if (!isFollowable || read.bytesRead < nameBytes || packedBytes === 0xffffffff) return null
  const dataStart = at + HEADER_BYTES + nameBytes + head.readUInt16LE(28)
  return {
    name: name.toString('utf8'),
    method,
    crc: head.readUInt32LE(14),
    packedBytes,
    bytes,
    dataStart,
    isEncrypted: (flags & 1) === 1,
  }
}

async function* bytesOf(path: string, member: LocalMember): AsyncGenerator<Uint8Array> {
  if (member.packedBytes === 0) return
  const packed = createReadStream(path, { start: member.dataStart, end: member.dataStart + member.packedBytes - 1 })
  const inflate = member.method === 8 ? createInflateRaw() : null
  if (inflate) packed.on('error', (error) => inflate.destroy(error)).pipe(inflate)
  let sum = 0
  let bytes = 0
  try {
    for await (const chunk of (inflate ?? packed) as AsyncIterable<Buffer>) {
      sum = crc32(chunk, sum)
      bytes += chunk.byteLength
      if (bytes > member.bytes) throw new Error(`'${member.name}' has more bytes than it says`)
      yield chunk
    }
  } finally {
    packed.destroy()
    inflate?.destroy()
  }
  if (sum !== member.crc) throw new Error(`The checksum of '${member.name}' is not that of its bytes`)
}
