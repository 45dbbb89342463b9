import 'server-only'
import type { Metadata } from 'next'
import { notFound, redirect } from 'next/navigation'
import { releaseLinks, type ReleaseLinks } from '@/components/public/release-links'
import { config } from '@/lib/platform/config/config'
import { database } from '@/lib/platform/database'
import { Problem } from '@/lib/platform/problems/problem'
import { getViewer } from '@/lib/work/people/session'
import { NEWEST, publicReleases } from '@/lib/work/releases/newest-standing'
import { readReleaseHead } from '@/lib/work/releases/read-release-page'
import type { Asked } from '@/lib/work/releases/table-query'

/** The page for whatever is not there or not open: which of both, nobody learns. */
export async function orNotFound<T>(work: Promise<T>): Promise<T> {
  try {
    return await work
  } catch (error) {
    if (error instanceof Problem && error.status === 404) notFound()
    throw error
  }
}

const keyOf = (asked: Asked): string | null => (typeof asked.key === 'string' && asked.key !== '' ? asked.key : null)

/** The release behind an address of a page. `newest` leads on to the number that it stands for now. */
export async function openRelease(slug: string, number: string, asked: Asked, rest = '') {
  const db = await database()
  if (number === NEWEST) {
    const { standing } = await publicReleases(db, slug)
    if (!standing) notFound()
    redirect(`/r/${slug}/${standing.number}${rest}`)
  }
  const key = keyOf(asked)
  const { release, head } = await orNotFound(
    readReleaseHead(db, slug, number, { viewer: await getViewer(), token: key }),
  )
  const links: ReleaseLinks = releaseLinks(
    release.slug,
    release.number,
    release.access === 'link' ? key : null,
    release.access === 'public',
  )
  return { db, release, head, links }
}

export const whole = (path: string): string => new URL(path, config().siteUrl).href

/** Search engines keep public pages only; an address with a secret is told to no other site. */
export function privacyOf(access: 'private' | 'link' | 'public'): Metadata {
  return access === 'public' ? {} : { robots: { index: false, follow: false }, referrer: 'no-referrer' }
}
