/** GET /api/health: is the server up and its database readable. Open to all; tells the version and nothing else. */
import { assertReadable } from '@/lib/platform/database'
import { log } from '@/lib/platform/log'
import { version } from '@/package.json'

export const dynamic = 'force-dynamic'

export async function GET(): Promise<Response> {
  try {
    await assertReadable()
  } catch (error) {
    log.error({ err: error }, 'health')
    return Response.json({ status: 'the database cannot be read', version }, { status: 503 })
  }
  return Response.json({ status: 'ok', version })
}
