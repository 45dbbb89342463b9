import { invalid } from '@/lib/platform/problems/problem'

/** Says after which candidate the next page begins. Opaque to callers, so that the order may change one day. */
export function writeCursor(afterId: number): string {
  return Buffer.from(`after:${afterId}`).toString('base64url')
}

/** @throws Problem 422 when the text is no cursor of ours. */
export function readCursor(cursor: string): number {
  const text = Buffer.from(cursor, 'base64url').toString('latin1')
  const id = /^after:([1-9]\d{0,15})$/.exec(text)?.[1]
  if (id === undefined || writeCursor(Number(id)) !== cursor) {
    const sentence =
      'The cursor is not one that this list gave. Take nextCursor of the page before, or leave it out to start over.'
    throw invalid(sentence, [{ name: 'cursor', reason: sentence }])
  }
  return Number(id)
}
