import 'server-only'
import type { Kysely } from 'kysely'
import { listNoticesOf, listPublicReleases, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { notFound } from '@/lib/platform/problems/problem'
import { releaseToRead } from './read-release'

/** What the stable address of a campaign's newest release is called in place of a number. */
export const NEWEST = 'newest'

export interface PublicReleases {
  /** Newest first. */
  releases: PublicRelease[]
  /** The newest that has a catalogue, has not been withdrawn and has no open erratum; null where none is left. */
  standing: ReleaseRow | null
}

export interface PublicRelease {
  release: ReleaseRow
  /** Numbers of the errata and the retraction of it, opened or not. */
  correctedBy: number[]
  retractedBy: number | null
}

/** The public releases of a campaign, by its slug. */
export async function publicReleases(db: Kysely<DB>, slug: string): Promise<PublicReleases> {
  return withFates(db, await listPublicReleases(db, slug))
}

/** Of every campaign, the one with the newest release first. */
export async function allPublicReleases(db: Kysely<DB>): Promise<PublicReleases[]> {
  const bySlug = new Map<string, ReleaseRow[]>()
  for (const release of await listPublicReleases(db)) {
    bySlug.set(release.slug, [...(bySlug.get(release.slug) ?? []), release])
  }
  return Promise.all([...bySlug.values()].map((rows) => withFates(db, rows)))
}

async function withFates(db: Kysely<DB>, rows: readonly ReleaseRow[]): Promise<PublicReleases> {
  const releases: PublicRelease[] = []
  // By number, since a clock can be set back.
  for (const release of rows.toSorted((a, b) => b.number - a.number)) {
    const notices = (await listNoticesOf(db, release.id)).filter(({ made }) => made === 1)
    releases.push({
      release,
      correctedBy: notices.filter(({ kind }) => kind === 'erratum').map(({ number }) => number),
      retractedBy: notices.find(({ kind }) => kind === 'retraction')?.number ?? null,
    })
  }
  // Once its erratum has been open a release is known to be wrong, and does not stand again when the erratum is withdrawn.
  const opened = new Set(releases.map(({ release }) => release.number))
  const standing = releases.find(
    ({ release, correctedBy, retractedBy }) =>
      release.kind !== 'retraction' && retractedBy === null && !correctedBy.some((number) => opened.has(number)),
  )
  return { releases, standing: standing?.release ?? null }
}

/**
 * The release behind an address: by its number, or the newest that stands. No session is looked at: public ones, and those opened with
 * their link's secret.
 * @throws Problem 404, alike where there is none and where it is not open.
 */
export async function openedRelease(
  db: Kysely<DB>,
  slug: string,
  number: string,
  token: string | null,
): Promise<ReleaseRow> {
  if (number === NEWEST) {
    const { standing } = await publicReleases(db, slug)
    if (!standing) throw notFound('public release that stands')
    return standing
  }
  return releaseToRead(db, slug, releaseNumber(number), { viewer: null, token })
}

/** As it stands in an address. @throws Problem 404 for what is no number of a release. */
export function releaseNumber(text: string): number {
  if (!/^[1-9]\d{0,8}$/.test(text)) throw notFound('release')
  return Number(text)
}
