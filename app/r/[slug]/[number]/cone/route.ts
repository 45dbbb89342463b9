import type { NextRequest } from 'next/server'
import { textResponse } from '@/app/api/_lib/text-response'
import { OPEN_TO_ALL, preflight } from '@/app/r/_lib/open-to-all'
import { config } from '@/lib/platform/config/config'
import { database } from '@/lib/platform/database'
import { log } from '@/lib/platform/log'
import { Problem } from '@/lib/platform/problems/problem'
import { coneDocument, coneErrorDocument } from '@/lib/work/releases/cone-document'
import { ConeError, readConeQuery } from '@/lib/work/releases/cone-query'
import { openedRelease } from '@/lib/work/releases/newest-standing'

const TYPES = {
  tabledata: 'text/xml; charset=utf-8',
  binary2: 'application/x-votable+xml;serialization=binary2; charset=utf-8',
}

/**
 * GET /r/{slug}/{number}/cone?RA=&DEC=&SR= and /r/{slug}/newest/cone: IVOA Simple Cone Search 1.03, for everybody. A query that cannot
 * be used is answered with 200 and the standard's error document, as its clients expect; an address without a release with 404 and
 * the same. No session is looked at; `key` opens what has a link.
 */
export async function GET(request: NextRequest, context: { params: Promise<{ slug: string; number: string }> }) {
  const { slug, number } = await context.params
  const parameters = request.nextUrl.searchParams
  const token = parameters.get('key')
  try {
    const db = await database()
    const release = await openedRelease(db, slug, number, token)
    const query = readConeQuery(parameters)
    const ask = { db, release, query, siteUrl: config().siteUrl, token, signal: request.signal }
    return await textResponse(await coneDocument(ask), headersOf(TYPES[query.format]))
  } catch (error) {
    if (error instanceof ConeError) return refusal(200, error.message)
    if (error instanceof Problem) {
      return refusal(error.status, 'There is no release here that is open to you. Check the address.')
    }
    if (request.signal.aborted) return new Response(null, { status: 499 })
    log.error({ err: error }, 'cone search failed')
    return refusal(500, 'Something went wrong on the server. Try again.')
  }
}

export const OPTIONS = preflight

function refusal(status: number, sentence: string): Response {
  return new Response(coneErrorDocument(sentence), { status, headers: headersOf(TYPES.tabledata) })
}

/** A release never changes, but it can be closed, corrected and withdrawn: an answer is asked for anew each time. */
const headersOf = (type: string) => ({
  ...OPEN_TO_ALL,
  'content-type': type,
  'cache-control': 'no-cache',
  'x-content-type-options': 'nosniff',
})
