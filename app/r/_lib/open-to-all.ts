/**
 * Lets pages of other sites read an answer with a script. That is safe where the answer is the same for everybody who knows its
 * address: no cookie is looked at to make it, and with `*` a browser lets nobody read an answer to a request that carried one
 * (Fetch, section 3.3.5). What is open to members by their session is never marked so.
 */
export const OPEN_TO_ALL = { 'access-control-allow-origin': '*' }

/** Answers the question that a browser asks before an unusual request. */
export function preflight(): Response {
  return new Response(null, {
    status: 204,
    headers: {
      ...OPEN_TO_ALL,
      'access-control-allow-methods': 'GET, HEAD, OPTIONS',
      'access-control-allow-headers': 'If-None-Match, Range, Accept',
      'access-control-max-age': '86400',
    },
  })
}
