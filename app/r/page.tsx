import type { Metadata } from 'next'
import { listed } from '@/app/r/_lib/listed'
import { PublicFrame } from '@/components/public/public-frame'
import { ReleaseList } from '@/components/public/release-list'
import { database } from '@/lib/platform/database'
import { allPublicReleases } from '@/lib/work/releases/newest-standing'

export const metadata: Metadata = { title: { absolute: 'Public releases · Ringside' } }
export const dynamic = 'force-dynamic'

/** /r: every public release of this site. */
export default async function Page() {
  const campaigns = await allPublicReleases(await database())
  const releases = campaigns.flatMap(({ releases, standing }) => releases.map((one) => listed(one, standing)))
  return (
    <PublicFrame place="Ringside" href="/r">
      <header className="flex flex-col gap-3">
        <h1 className="text-display font-semibold">
          {releases.length === 0 ? 'Nothing is published here yet' : 'Published catalogues'}
        </h1>
        <p className="max-w-2xl text-mute">
          {releases.length === 0
            ? 'Releases stand here once a campaign makes one public.'
            : 'Catalogues of candidate strong gravitational lenses, frozen and numbered, newest first.'}
        </p>
      </header>
      {releases.length ? <ReleaseList releases={releases} withCampaign /> : null}
    </PublicFrame>
  )
}
