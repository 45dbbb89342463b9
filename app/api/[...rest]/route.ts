import { route } from '@/app/api/_lib/route'
import { Problem } from '@/lib/platform/problems/problem'

/** Scripts that mistype an address get a problem document like from everywhere else under /api, not a page. */
const nowhere = route({
  handler: async ({ request }) => {
    throw new Problem(
      404,
      'no-such-address',
      `${request.nextUrl.pathname} is no address of this API. Check its spelling and that nothing of it is missing.`,
    )
  },
})

export {
  nowhere as GET,
  nowhere as HEAD,
  nowhere as POST,
  nowhere as PUT,
  nowhere as PATCH,
  nowhere as DELETE,
  nowhere as OPTIONS,
}
