import { once } from 'node:events'
import type { Readable } from 'node:stream'
import { ZipFile } from 'yazl'

export interface ZipMember {
  name: string
  /** Pictures are compressed already. */
  compress: boolean
  open: () => Readable
}

/** In local time, because the format stores local time: the same files give the same archive anywhere. */
const memberTime = () => new Date(2000, 0, 1)

/**
 * An archive of files, one open at a time, in constant memory. Names, order and times are given, so that the same files give the same
 * bytes with the same zlib. Ends with the error of a member that cannot be read.
 */
export async function* zipOf(
  members: AsyncIterable<ZipMember> | Iterable<ZipMember>,
): AsyncGenerator<Uint8Array, void, void> {
  const zip = new ZipFile()
  const output = zip.outputStream as Readable
  zip.on('error', (error: Error) => output.destroy(error))
  const added = addAll(zip, members).catch((error: unknown) => output.destroy(error as Error))
  for await (const chunk of output) yield chunk as Uint8Array
  await added
}

async function addAll(zip: ZipFile, members: AsyncIterable<ZipMember> | Iterable<ZipMember>): Promise<void> {
  for await (const { name, compress, open } of members) {
    const stream = open()
    const ended = once(stream, 'close')
    zip.addReadStream(stream, name, { mtime: memberTime(), mode: 0o100644, forceDosTimestamp: true, compress })
    await ended
  }
  zip.end()
}
