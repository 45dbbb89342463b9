/**
 * Several stamps in one file: `RSST`, how many as little-endian 32-bit, then for each its SHA-256 (32 bytes), where its bytes begin in
 * the file and how many they are (32-bit each), and after that their bytes.
 */
const MAGIC = new Uint8Array([0x52, 0x53, 0x53, 0x54])
const START = 8
const ENTRY = 40
export const MOST_STAMPS = 400
export const LONGEST_HEAD = START + MOST_STAMPS * ENTRY

const bytesOfHash = (sha256: string): Uint8Array => Uint8Array.from(Buffer.from(sha256, 'hex'))

/** @param stamps names and bytes. @throws RangeError for more than MOST_STAMPS. */
export function packOf(stamps: readonly (readonly [string, Uint8Array])[]): Uint8Array {
  if (stamps.length > MOST_STAMPS) throw new RangeError(`${stamps.length} stamps are too many for one file.`)
  let at = START + stamps.length * ENTRY
  const file = new Uint8Array(stamps.reduce((sum, [, bytes]) => sum + bytes.length, at))
  const view = new DataView(file.buffer)
  file.set(MAGIC)
  view.setUint32(4, stamps.length, true)
  stamps.forEach(([sha256, bytes], k) => {
    const entry = START + k * ENTRY
    file.set(bytesOfHash(sha256), entry)
    view.setUint32(entry + 32, at, true)
    view.setUint32(entry + 36, bytes.length, true)
    file.set(bytes, at)
    at += bytes.length
  })
  return file
}

/** The entries at the beginning of a file, all of LONGEST_HEAD or as much as there is; null where it is no pack, or not whole. */
export function headOfPack(start: Uint8Array): Uint8Array | null {
  if (start.length < START || MAGIC.some((byte, k) => start[k] !== byte)) return null
  const count = new DataView(start.buffer, start.byteOffset).getUint32(4, true)
  const end = START + count * ENTRY
  return count <= MOST_STAMPS && end <= start.length ? start.subarray(START, end) : null
}

export function findInPack(head: Uint8Array, sha256: string): { offset: number; length: number } | null {
  const wanted = bytesOfHash(sha256)
  for (let entry = 0; entry < head.length; entry += ENTRY) {
    if (wanted.some((byte, k) => head[entry + k] !== byte)) continue
    const view = new DataView(head.buffer, head.byteOffset + entry, ENTRY)
    return { offset: view.getUint32(32, true), length: view.getUint32(36, true) }
  }
  return null
}
