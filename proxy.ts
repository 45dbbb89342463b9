import { NextResponse, type NextRequest } from 'next/server'
import { ASKED_PATH_HEADER } from './lib/work/people/asked-path'

/**
 * Tells pages the address they were asked by, so that a visitor who signs in comes back to just that one. It decides nothing:
 * who may see a page is asked by the page. Uploads must not pass through here (a proxy cuts bodies at 10 MB): pages only.
 */
export function proxy(request: NextRequest): NextResponse {
  const headers = new Headers(request.headers)
  headers.set(ASKED_PATH_HEADER, request.nextUrl.pathname + request.nextUrl.search)
  return NextResponse.next({ request: { headers } })
}

export const config = { matcher: ['/', '/campaigns/:path*', '/account', '/admin/:path*'] }
