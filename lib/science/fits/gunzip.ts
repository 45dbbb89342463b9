// gzip around a whole FITS file or around one tile, by node:zlib: several members, checksums, bounded output.
import { gunzipSync, constants } from 'node:zlib'
import { FitsError } from '@/lib/science/fits/fits-types'

export function isGzip(bytes: Uint8Array): boolean {
  return bytes[0] === 0x1f && bytes[1] === 0x8b
}

/** Inflates all members (RFC 1952, 2.2). Stops at `maxBytes` of output: memory is bounded by that, whatever the input. */
export function gunzipFile(bytes: Uint8Array, maxBytes: number): Uint8Array {
  try {
    return gunzipSync(bytes, { maxOutputLength: maxBytes })
  } catch (cause) {
    if (codeOf(cause) === 'ERR_BUFFER_TOO_LARGE') {
      throw new FitsError(
        'too-large',
        `The gzip file of ${bytes.length} bytes unpacks to more than the ${maxBytes} bytes that are allowed for one file.`,
        { cause },
      )
    }
    const why =
      codeOf(cause) === 'Z_BUF_ERROR'
        ? 'it ends before its stream does'
        : `its stream is damaged (${(cause as Error).message})`
    throw new FitsError('corrupt-compression', `The gzip file of ${bytes.length} bytes cannot be unpacked: ${why}.`, {
      cause,
    })
  }
}

/** The first bytes of the unpacked file, at most about 4 MiB: enough to read its header before the rest is unpacked. */
export function peekGzip(bytes: Uint8Array): Uint8Array | null {
  try {
    return gunzipSync(bytes.subarray(0, 4096), {
      finishFlush: constants.Z_SYNC_FLUSH,
      maxOutputLength: 8 * 1024 * 1024,
    })
  } catch {
    return null // whatever is wrong is found and named when the whole is unpacked
  }
}

function codeOf(cause: unknown): string | undefined {
  return (cause as { code?: string }).code
}
