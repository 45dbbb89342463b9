// GET and POST /api/auth/*: next-auth's own addresses (sign in, sign out, session, CSRF token).
import NextAuth from 'next-auth'
import type { NextRequest } from 'next/server'
import { authOptions } from '@/lib/work/people/auth-options'

// The options are read at the first request, not at import: the build has no data folder.
async function handler(request: NextRequest, context: RouteContext<'/api/auth/[...nextauth]'>): Promise<Response> {
  return NextAuth(request, context, authOptions())
}

export { handler as GET, handler as POST }
