import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { listed } from '@/app/r/_lib/listed'
import { PublicFrame } from '@/components/public/public-frame'
import { ReleaseList } from '@/components/public/release-list'
import { database } from '@/lib/platform/database'
import { publicReleases } from '@/lib/work/releases/newest-standing'

type Props = PageProps<'/r/[slug]'>

async function open({ params }: Props) {
  const { releases, standing } = await publicReleases(await database(), (await params).slug)
  // A campaign without a public release is as unknown as one that is not there.
  if (releases.length === 0) notFound()
  return { releases, standing, newest: releases[0].release }
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  const { newest } = await open(props)
  return { title: { absolute: `Releases of ${newest.campaign_name} · ${newest.survey}` } }
}

/** /r/{slug}: the public releases of a campaign, the newest that stands first. */
export default async function Page(props: Props) {
  const { releases, standing, newest } = await open(props)
  const path = `/r/${newest.slug}`
  return (
    <PublicFrame place={`${newest.survey} · ${newest.campaign_name}`} href={path}>
      <header className="flex flex-col gap-3">
        <h1 className="max-w-4xl text-display font-semibold text-balance">
          {standing ? standing.title : 'No release of this campaign stands'}
        </h1>
        <p className="max-w-2xl text-mute">
          {standing
            ? `Release ${standing.number} is the newest that stands. ${path}/newest always leads to it, and ${path}/newest/cone is its cone search.`
            : 'Each of its public releases is withdrawn, or has an erratum that is. What was wrong stands on their pages.'}
        </p>
        {standing ? (
          <p>
            <a
              href={`${path}/${standing.number}`}
              className="inline-flex min-h-9 items-center rounded-control bg-lamp px-3.5 text-small font-semibold text-lamp-ink hover:brightness-110"
            >
              Open release {standing.number}
            </a>
          </p>
        ) : null}
      </header>
      <section aria-labelledby="releases" className="flex flex-col gap-3">
        <h2 id="releases" className="text-title font-semibold">
          {releases.length === 1 ? 'The one release' : `All ${releases.length} releases`}
        </h2>
        <ReleaseList releases={releases.map((one) => listed(one, standing))} withCampaign={false} />
      </section>
    </PublicFrame>
  )
}
