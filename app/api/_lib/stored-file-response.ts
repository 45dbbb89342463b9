import { Readable } from 'node:stream'
import type { NextRequest } from 'next/server'
import type { OpenedFile } from '@/lib/work/releases/read-release'

/**
 * A file that never changes, named by its hash: a client that has it asks no more. Streamed from disk a chunk at a time; a client that
 * goes away closes it. HEAD answers the same without the body.
 */
export function storedFileResponse(
  request: NextRequest,
  file: OpenedFile,
  { fileName, shared }: { fileName: string; shared: boolean },
): Response {
  const etag = `"${file.sha256}"`
  const headers = {
    etag,
    'content-type': file.mediaType,
    // The names are made of slugs and of our own file names: ASCII without quotes.
    'content-disposition': `attachment; filename="${fileName}"`,
    'x-content-type-options': 'nosniff',
    // Who may read it can change, so each use is asked for; the answer is then 304.
    'cache-control': `${shared ? 'public' : 'private'}, no-cache`,
  }
  const known = request.headers
    .get('if-none-match')
    ?.split(',')
    .map((tag) => tag.trim().replace(/^W\//, ''))
  if (known?.includes(etag) || known?.includes('*')) return new Response(null, { status: 304, headers })
  const whole = { ...headers, 'content-length': String(file.bytes) }
  if (request.method === 'HEAD') return new Response(null, { headers: whole })
  const body = Readable.toWeb(file.stream()) as ReadableStream<Uint8Array>
  return new Response(body, { headers: whole })
}
