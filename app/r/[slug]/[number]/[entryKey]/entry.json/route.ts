import { z } from 'zod'
import { route } from '@/app/api/_lib/route'
import { OPEN_TO_ALL, preflight } from '@/app/r/_lib/open-to-all'
import { releaseLinks } from '@/components/public/release-links'
import { config } from '@/lib/platform/config/config'
import { entryJson } from '@/lib/work/releases/entry-json'
import { readEntryPage, readReleaseHead } from '@/lib/work/releases/read-release-page'

/** GET /r/{slug}/{number}/{entryKey}/entry.json: an entry as JSON, for whoever may read its release. */
export const GET = route({
  params: z.strictObject({ slug: z.string(), number: z.string(), entryKey: z.string() }),
  query: z.object({ key: z.string().optional() }),
  handler: async ({ db, viewer, params, query }) => {
    const token = query.key ?? null
    const { release, head } = await readReleaseHead(db, params.slug, params.number, { viewer, token })
    const page = await readEntryPage(db, release, params.entryKey)
    const links = releaseLinks(release.slug, release.number, release.access === 'link' ? token : null)
    const whole = (path: string) => new URL(path, config().siteUrl).href
    const body = entryJson(head, page, {
      entry: whole(links.entry(page.entry.key)),
      release: whole(links.page()),
      stamp: (sha256) => whole(links.stamp(page.entry.key, sha256)),
    })
    const isPublic = release.access === 'public'
    return Response.json(body, {
      headers: { ...(isPublic ? OPEN_TO_ALL : {}), 'cache-control': `${isPublic ? 'public' : 'private'}, no-cache` },
    })
  },
})

export const OPTIONS = preflight
