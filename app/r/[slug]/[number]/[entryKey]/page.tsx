import type { Metadata } from 'next'
import { openRelease, orNotFound, privacyOf, whole } from '@/app/r/_lib/open-page'
import { EntryPage } from '@/components/public/entry-page'
import { releaseLinks } from '@/components/public/release-links'
import { readEntryPage } from '@/lib/work/releases/read-release-page'

type Props = PageProps<'/r/[slug]/[number]/[entryKey]'>

/** A segment as the browser sent it: `+` is a plus sign in a path, and what was escaped comes escaped. */
function keyOf(entryKey: string): string {
  try {
    return decodeURIComponent(entryKey)
  } catch {
    return entryKey
  }
}

async function open({ params, searchParams }: Props) {
  const { slug, number, entryKey } = await params
  const opened = await openRelease(slug, number, await searchParams, `/${entryKey}`)
  const page = await orNotFound(readEntryPage(opened.db, opened.release, keyOf(entryKey)))
  const address = whole(releaseLinks(opened.head.slug, opened.head.number, null).entry(page.entry.key))
  return { ...opened, page, address }
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  const { head, page, links, address } = await open(props)
  const { designation, key, class: grade } = page.entry
  return {
    title: { absolute: `${designation} · release ${head.number}` },
    description: `Candidate strong gravitational lens${grade ? `, class ${grade}` : ''}, in ${head.title}. ${head.cautions[0]}`,
    ...privacyOf(head.access),
    alternates: { canonical: address, types: { 'application/json': links.entryJson(key) } },
  }
}

/** /r/{slug}/{number}/{entryKey}: the permanent page of an entry. */
export default async function Page(props: Props) {
  const { head, page, links, address } = await open(props)
  return <EntryPage head={head} page={page} links={links} address={address} />
}
