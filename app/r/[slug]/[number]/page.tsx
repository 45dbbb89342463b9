import type { Metadata } from 'next'
import { openRelease, privacyOf, whole } from '@/app/r/_lib/open-page'
import { DatasetDescription } from '@/app/r/_lib/dataset-description'
import { ReleasePage } from '@/components/public/release-page'
import { NEWEST } from '@/lib/work/releases/newest-standing'
import { readReleaseContents, readReleaseTable } from '@/lib/work/releases/read-release-page'
import { releasePath } from '@/lib/work/releases/release-address'
import { releaseSky } from '@/lib/work/releases/release-sky'
import { readTableQuery } from '@/lib/work/releases/table-query'

type Props = PageProps<'/r/[slug]/[number]'>

export async function generateMetadata({ params, searchParams }: Props): Promise<Metadata> {
  const { slug, number } = await params
  const { head, links } = await openRelease(slug, number, await searchParams)
  return {
    title: { absolute: `${head.title} · release ${head.number}` },
    description: `${head.description.slice(0, 280)} ${head.cautions[0]}`,
    authors: head.authors.map((name) => ({ name })),
    ...privacyOf(head.access),
    alternates: {
      canonical: whole(releasePath(head.slug, head.number)),
      types: {
        'application/x-votable+xml': links.file('catalogue.vot'),
        'text/csv': links.file('catalogue.csv'),
        'application/json': links.file('catalogue.json'),
      },
    },
  }
}

/** /r/{slug}/{number}: a release for whoever may read it, without script. */
export default async function Page({ params, searchParams }: Props) {
  const [{ slug, number }, asked] = await Promise.all([params, searchParams])
  const { db, release, head, links } = await openRelease(slug, number, asked)
  const query = readTableQuery(asked)
  const [contents, sky, table] = await Promise.all([
    readReleaseContents(db, release),
    releaseSky(db, release.id),
    readReleaseTable(db, release, query),
  ])
  const addresses = {
    release: whole(releasePath(head.slug, head.number)),
    cone: whole(links.cone),
    newestCone: whole(`/r/${head.slug}/${NEWEST}/cone`),
    capabilities: links.vosi('capabilities'),
    json: links.file('catalogue.json'),
  }
  return (
    <>
      <DatasetDescription
        head={head}
        contents={contents}
        sky={sky}
        addresses={addresses}
        fileAt={(name) => whole(links.file(name))}
      />
      <ReleasePage {...{ head, contents, sky, table, query, links, addresses }} />
    </>
  )
}
