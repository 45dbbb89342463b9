/** GET /api/health: is the server up and its database readable. Open to all; tells the version and nothing else. */
import { database } from '@/lib/platform/database'
import { version } from '@/package.json'

export const dynamic = 'force-dynamic'

export async function GET(): Promise<Response> {
  await database()
  return Response.json({ status: 'ok', version })
}
