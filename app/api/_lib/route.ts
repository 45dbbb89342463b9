import { randomUUID } from 'node:crypto'
import type { NextRequest } from 'next/server'
import type { Kysely } from 'kysely'
import { type z } from 'zod'
import type { DB } from '@/db/schema'
import { database } from '@/lib/platform/database'
import { Problem, conflict, forbidden } from '@/lib/platform/problems/problem'
import { PERSON_HEADER } from '@/lib/work/people/person-header'
import { getViewer } from '@/lib/work/people/session'
import type { Viewer } from '@/lib/work/people/viewer'
import { problemResponse } from './problem-response'

/**
 * Wraps a route handler: session, same-origin check on changes, parsing with zod, errors as problem documents. Who may do
 * it is decided by the use case that the handler calls, from `viewer` (null when signed out).
 */
interface Shape<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType> {
  params?: P
  query?: Q
  /** JSON body. Leave out for none or for a raw body, which the handler streams from `request`. */
  body?: B
  handler: (input: {
    request: NextRequest
    db: Kysely<DB>
    viewer: Viewer | null
    params: z.output<P>
    query: z.output<Q>
    body: z.output<B>
  }) => Promise<Response>
}

type Handler = (request: NextRequest, context: { params: Promise<unknown> }) => Promise<Response>

/**
 * A browser says where a change comes from: in Sec-Fetch-Site, or on plain http, where it leaves that out, in Origin. A script
 * says nothing, and has no cookie that another site could borrow.
 */
function assertSameOrigin(request: NextRequest): void {
  if (request.method === 'GET' || request.method === 'HEAD') return
  const site = request.headers.get('sec-fetch-site')
  const origin = request.headers.get('origin')
  const otherSite = site !== null && site !== 'same-origin' && site !== 'none'
  const otherOrigin = origin !== null && hostOf(origin) !== request.headers.get('host')
  if (otherSite || otherOrigin) {
    throw forbidden('Changes are taken from this site only, and the request came from another.')
  }
}

/** Host and port of an origin; null for `null`, which sandboxed and local pages send. */
function hostOf(origin: string): string | null {
  return URL.canParse(origin) ? new URL(origin).host : null
}

/** A page that one person opened does nothing in the name of another who has signed in since. */
function assertSamePerson(request: NextRequest, viewer: Viewer | null): void {
  const person = request.headers.get(PERSON_HEADER)
  if (person === null || viewer === null || person === String(viewer.id)) return
  throw conflict(
    'other-person',
    'The page that sent this was opened by somebody else than who is signed in now, so nothing was changed. Sign in as that person, or load the page again.',
  )
}

async function parseJson(request: NextRequest): Promise<unknown> {
  try {
    return await request.json()
  } catch (cause) {
    throw new Problem(400, 'not-json', 'The body is not JSON. Send one JSON object.', [], { cause })
  }
}

export function route<
  P extends z.ZodType = z.ZodObject,
  Q extends z.ZodType = z.ZodObject,
  B extends z.ZodType = z.ZodUnknown,
>(shape: Shape<P, Q, B>): Handler {
  return async (request, context) => {
    const requestId = randomUUID()
    try {
      assertSameOrigin(request)
      const [rawParams, db, viewer] = await Promise.all([context.params, database(), getViewer()])
      assertSamePerson(request, viewer)
      const rawQuery = Object.fromEntries(request.nextUrl.searchParams)
      const params = (shape.params ? shape.params.parse(rawParams) : rawParams) as z.output<P>
      const query = (shape.query ? shape.query.parse(rawQuery) : rawQuery) as z.output<Q>
      const body = (shape.body ? shape.body.parse(await parseJson(request)) : undefined) as z.output<B>
      const response = await shape.handler({ request, db, viewer, params, query, body })
      response.headers.set('x-request-id', requestId)
      return response
    } catch (error) {
      return problemResponse(error, requestId)
    }
  }
}
