/** Gathers small pieces of text into chunks worth a network write. */

const CHUNK_CHARACTERS = 32_768

/** Yields the same text in chunks of about 32 thousand characters; never an empty one. */
export async function* inChunks(pieces: AsyncIterable<string> | Iterable<string>): AsyncGenerator<string> {
  let chunk = ''
  for await (const piece of pieces) {
    chunk += piece
    if (chunk.length < CHUNK_CHARACTERS) continue
    yield chunk
    chunk = ''
  }
  if (chunk !== '') yield chunk
}
