import { config } from '@/lib/platform/config/config'
import { Problem } from '@/lib/platform/problems/problem'
import type { FileKind } from './file-name'
import type { BlobStore, StoredBlob } from '@/lib/platform/storage/blob-store'

/** A request's body and the Content-Length that came with it. */
export interface Body {
  chunks: AsyncIterable<Uint8Array>
  contentLength: string | null
}

const megabytes = (bytes: number): string => `${Math.round(bytes / 1024 / 1024)} MiB`

const tooLarge = (bytes: number, limit: number, setting: string): Problem =>
  new Problem(
    413,
    'file-too-large',
    `The file has ${bytes} bytes; this site takes at most ${megabytes(limit)} (${setting}). Nothing was kept.`,
  )

/**
 * Streams a body to the blob store and keeps it only if it has as many bytes as Content-Length says. Without a Content-Length
 * it is refused (411), chunked or not: then nothing would tell a whole file from one that a proxy cut short.
 * @throws Problem 400, 411, 413, 507; nothing is kept then.
 */
export async function storeBody(
  store: BlobStore,
  { chunks, contentLength }: Body,
  kind: FileKind = 'fits',
): Promise<StoredBlob> {
  const [limit, setting] =
    kind === 'archive'
      ? [config().maxArchiveBytes, 'RINGSIDE_MAX_ARCHIVE_MB']
      : [config().maxFileBytes, 'RINGSIDE_MAX_FILE_MB']
  if (contentLength === null || !/^\d{1,15}$/.test(contentLength)) {
    throw new Problem(
      411,
      'length-required',
      'Send the file with a Content-Length, so that a whole file can be told from a part.',
    )
  }
  const expected = Number(contentLength)
  if (expected > limit) throw tooLarge(expected, limit, setting)
  let received = 0
  try {
    return await store.putStream(whole(chunks, expected), (total) => {
      received = total
      if (total > expected) throw cutShort(total, expected)
    })
  } catch (error) {
    if (error instanceof Problem) throw error
    const code = (error as NodeJS.ErrnoException).code
    if (code === 'ENOSPC' || code === 'EDQUOT') {
      throw new Problem(
        507,
        'disk-full',
        'The server has no room for this file. Nothing was kept; tell an administrator.',
        [],
        { cause: error },
      )
    }
    if (
      code !== undefined &&
      !['ECONNRESET', 'ABORT_ERR', 'ERR_STREAM_PREMATURE_CLOSE', 'UND_ERR_SOCKET'].includes(code)
    )
      throw error
    throw cutShort(received, expected, error)
  }
}

async function* whole(chunks: AsyncIterable<Uint8Array>, expected: number): AsyncIterable<Uint8Array> {
  let received = 0
  for await (const chunk of chunks) {
    received += chunk.byteLength
    yield chunk
  }
  // Thrown inside the stream, so that the store leaves nothing behind.
  if (received < expected) throw cutShort(received, expected)
}

const cutShort = (received: number, expected: number, cause?: unknown): Problem =>
  new Problem(
    400,
    'length-mismatch',
    `${received} bytes came where Content-Length says ${expected}. Nothing was kept: send the file again.`,
    [],
    { cause },
  )
