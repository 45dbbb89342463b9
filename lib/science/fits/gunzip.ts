// gzip around a whole FITS file, by node:zlib: several members, checksums, bounded output.
import { createGunzip, gunzipSync } from 'node:zlib'
import { FitsError } from '@/lib/science/fits/fits-types'

export function isGzip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x1f && bytes[1] === 0x8b
}

/** Inflates all members (RFC 1952, 2.2); null when they come to more than `maxBytes`, which also bounds the memory. */
export function gunzipSmall(bytes: Uint8Array, maxBytes: number): Uint8Array | null {
  try {
    return gunzipSync(bytes, { maxOutputLength: maxBytes })
  } catch (cause) {
    if (codeOf(cause) === 'ERR_BUFFER_TOO_LARGE') return null
    throw gzipFault(bytes.length, cause)
  }
}

/** The same bit by bit: nothing is unpacked beyond what is asked for, give or take a chunk. */
export function gunzipChunks(bytes: Uint8Array): AsyncIterable<Uint8Array> {
  const stream = createGunzip({ chunkSize: 256 * 1024 })
  stream.end(bytes)
  return stream
}

/** What zlib has thrown, in words. */
export function gzipFault(packed: number, cause: unknown): FitsError {
  const why =
    codeOf(cause) === 'Z_BUF_ERROR'
      ? 'it ends before its stream does'
      : `its stream is damaged (${(cause as Error).message})`
  return new FitsError('corrupt-compression', `The gzip file of ${packed} bytes cannot be unpacked: ${why}.`, { cause })
}

function codeOf(cause: unknown): string | undefined {
  return (cause as { code?: string }).code
}
