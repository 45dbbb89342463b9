import { crc32, deflateRawSync, gzipSync } from 'node:zlib'
import tar from 'tar-stream'

/** A member of an archive for tests; the odd ones that no tool would write, too. */
export interface MemberToPack {
  name: string
  bytes: Uint8Array
  /** Bit 0 of the flags: encrypted. */
  encrypted?: boolean
  /** Unix mode with its type bits. */
  mode?: number
  /** Another checksum than that of the bytes. */
  crc?: number
  method?: number
}

/** A ZIP archive as PKWARE APPNOTE 6.3 has it: local headers with sizes, central directory, end record. */
export function packZip(members: readonly MemberToPack[]): Uint8Array {
  const parts: Buffer[] = []
  const directory: Buffer[] = []
  let at = 0
  for (const member of members) {
    const name = Buffer.from(member.name, 'utf8')
    const packed = deflateRawSync(member.bytes)
    const shared = Buffer.alloc(26)
    shared.writeUInt16LE(20, 0)
    shared.writeUInt16LE(0x800 | (member.encrypted ? 1 : 0), 2)
    shared.writeUInt16LE(member.method ?? 8, 4)
    shared.writeUInt32LE(member.crc ?? crc32(member.bytes), 10)
    shared.writeUInt32LE(packed.byteLength, 14)
    shared.writeUInt32LE(member.bytes.byteLength, 18)
    shared.writeUInt16LE(name.byteLength, 22)
    parts.push(Buffer.from([0x50, 0x4b, 3, 4]), shared, name, packed)
    const tail = Buffer.alloc(14)
    tail.writeUInt32LE(((member.mode ?? 0o100644) << 16) >>> 0, 6)
    tail.writeUInt32LE(at, 10)
    // Version made by: 3 is Unix.
    directory.push(Buffer.from([0x50, 0x4b, 1, 2, 20, 3]), shared, tail, name)
    at += 30 + name.byteLength + packed.byteLength
  }
  const central = Buffer.concat(directory)
  const end = Buffer.alloc(22)
  end.writeUInt32LE(0x06054b50, 0)
  end.writeUInt16LE(members.length, 8)
  end.writeUInt16LE(members.length, 10)
  end.writeUInt32LE(central.byteLength, 12)
  end.writeUInt32LE(at, 16)
  return Buffer.concat([...parts, central, end])
}

export async function packTar(
  members: readonly (MemberToPack & { type?: tar.Header['type']; linkname?: string })[],
  { gzip = false } = {},
): Promise<Uint8Array> {
  const pack = tar.pack()
  for (const { name, bytes, type, linkname } of members) {
    if (type === undefined) pack.entry({ name }, Buffer.from(bytes))
    else pack.entry({ name, type, linkname })
  }
  pack.finalize()
  const parts: Buffer[] = []
  for await (const part of pack as AsyncIterable<Buffer>) parts.push(part)
  const whole = Buffer.concat(parts)
  return gzip ? gzipSync(whole) : whole
}
