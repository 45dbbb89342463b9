import 'server-only'
import type { ReadStream } from 'node:fs'
import type { Kysely } from 'kysely'
import { findReleaseBySlug, findReleaseFile, listNoticesOf, type ReleaseRow } from '@/db/queries/releases'
import { findCampaignMembership } from '@/db/queries/people'
import type { DB } from '@/db/schema'
import { notFound } from '@/lib/platform/problems/problem'
import type { BlobStore } from '@/lib/platform/storage/blob-store'
import { secretMatches } from '@/lib/work/people/secrets'
import type { Viewer } from '@/lib/work/people/viewer'

/** Whoever asks: signed in or not, with the secret of a link or without. */
export interface Reader {
  viewer: Viewer | null
  token: string | null
}

/**
 * A complete release, for whoever may read it: anybody where it is public, whoever has its link, and the campaign's leads and viewers.
 * Graders read it as anybody does, since it holds verdicts of what they may still have to grade.
 * @throws Problem 404, alike where there is none, where it is still being made, and where it is not open to this reader.
 */
export async function releaseToRead(db: Kysely<DB>, slug: string, number: number, reader: Reader): Promise<ReleaseRow> {
  const release = await findReleaseBySlug(db, slug, number)
  if (!release || release.made === 0 || !(await mayRead(db, release, reader))) throw notFound('release')
  return release
}

async function mayRead(db: Kysely<DB>, release: ReleaseRow, { viewer, token }: Reader): Promise<boolean> {
  if (release.access === 'public') return true
  if (release.access === 'link' && release.tokenHash && token && secretMatches(token, release.tokenHash)) return true
  if (!viewer) return false
  const member = await findCampaignMembership(db, release.slug, viewer.id)
  return member !== null && member !== undefined && member.role !== 'grader'
}

export interface ReleaseNotice {
  number: number
  kind: 'erratum' | 'retraction'
  statement: string
  /** Whether this reader may read that release too. */
  isOpen: boolean
  /** That release was withdrawn in its turn. */
  isWithdrawn: boolean
}

/**
 * What corrects or withdraws a release, oldest first, from the moment its files are there: whoever reads the old one is told, also
 * where nobody has opened the new one.
 */
export async function noticesOf(db: Kysely<DB>, release: ReleaseRow, reader: Reader): Promise<ReleaseNotice[]> {
  const notices: ReleaseNotice[] = []
  for (const later of await listNoticesOf(db, release.id)) {
    if (later.kind === 'release' || later.made === 0) continue
    const isOpen = await mayRead(db, later, reader)
    const isWithdrawn = (await listNoticesOf(db, later.id)).some(
      ({ kind, made }) => kind === 'retraction' && made === 1,
    )
    notices.push({ number: later.number, kind: later.kind, statement: later.statement ?? '', isOpen, isWithdrawn })
  }
  return notices
}

export interface OpenedFile {
  name: string
  mediaType: string
  bytes: number
  sha256: string
  /** Read it to the end or destroy it. */
  stream(): ReadStream
}

/** A file of a release that the caller may read. @throws Problem 404 without that file. */
export async function openReleaseFile(
  db: Kysely<DB>,
  blobs: BlobStore,
  release: ReleaseRow,
  name: string,
): Promise<OpenedFile> {
  const file = await findReleaseFile(db, release.id, name)
  if (!file || !(await blobs.has(file.sha256))) throw notFound('file of this release')
  return {
    name,
    mediaType: file.media_type,
    bytes: file.bytes,
    sha256: file.sha256,
    stream: () => blobs.stream(file.sha256),
  }
}
