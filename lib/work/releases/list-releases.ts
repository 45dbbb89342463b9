import 'server-only'
import type { Kysely } from 'kysely'
import { listCampaignJobs } from '@/db/queries/jobs'
import { listReleaseFiles, listReleases, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { ReleaseAccess, ReleaseKind } from '@/db/schema/releases'
import { fromJson, type Json } from '@/db/schema/values'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import { forbidden } from '@/lib/platform/problems/problem'
import { mayExport } from '@/lib/work/catalogue/export-catalogue'
import type { CampaignPermit } from '@/lib/work/people/permission'
import type { ReleaseNotice } from './read-release'
import { releasePath } from './release-address'

export interface ListedRelease {
  number: number
  kind: ReleaseKind
  corrects: number | null
  statement: string | null
  title: string
  frozenAt: string
  entries: number
  candidates: number
  access: ReleaseAccess
  /** Where it is read, once it is complete. */
  path: string
  /** How far its files are; null once they are all there. */
  making: { done: number; total: number; error: string | null; gaveUp: boolean } | null
  /** Why a lead left it behind without them. */
  givenUp: string | null
  notices: ReleaseNotice[]
  files: { name: string; bytes: number; sha256: string }[]
}

/** The campaign's releases, newest first, for its leads and viewers. @throws Problem 403 for graders, as the catalogue's file. */
export async function releaseList(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<ListedRelease[]> {
  if (!mayExport(permit)) {
    throw forbidden(
      'A release holds verdicts of candidates that you may still have to grade. Once one is public you can read it as anybody can.',
    )
  }
  const releases = await listReleases(db, permit.campaign.id)
  const byId = new Map(releases.map((release) => [release.id, release]))
  const jobs = releases.some(isBeingMade) ? await makingJobs(db, permit.campaign.id) : new Map()
  return Promise.all(
    releases.map(async (release) => ({
      number: release.number,
      kind: release.kind,
      corrects: release.corrects_id === null ? null : (byId.get(release.corrects_id)?.number ?? null),
      statement: release.statement,
      title: release.title,
      frozenAt: release.created_at,
      entries: release.entries,
      candidates: release.candidates,
      access: release.access,
      path: releasePath(release.slug, release.number),
      making: isBeingMade(release) ? (jobs.get(release.id) ?? { done: 0, total: 0, error: null, gaveUp: true }) : null,
      givenUp: release.givenUpReason,
      notices: releases
        .filter(({ corrects_id: of, givenUpReason }) => of === release.id && givenUpReason === null)
        .toReversed()
        .flatMap((notice) => noticeOf(notice, releases)),
      files: (await listReleaseFiles(db, release.id)).map(({ name, bytes, sha256 }) => ({ name, bytes, sha256 })),
    })),
  )
}

const isBeingMade = ({ made, givenUpReason }: ReleaseRow): boolean => made === 0 && givenUpReason === null

function noticeOf({ id, number, kind, statement }: ReleaseRow, releases: readonly ReleaseRow[]): ReleaseNotice[] {
  if (kind === 'release') return []
  const isWithdrawn = releases.some(
    (one) => one.corrects_id === id && one.kind === 'retraction' && one.made === 1 && one.givenUpReason === null,
  )
  return [{ number, kind, statement: statement ?? '', isOpen: true, isWithdrawn }]
}

type Making = NonNullable<ListedRelease['making']>

/** The newest job of each release that is not done. */
async function makingJobs(db: Kysely<DB>, campaignId: number): Promise<Map<number, Making>> {
  const making = new Map<number, Making>()
  for (const job of await listCampaignJobs(db, campaignId)) {
    if (job.kind !== JOB.makeRelease) continue
    const { releaseId } = fromJson(job.payload as Json<{ releaseId: number }>)
    if (making.has(releaseId)) continue
    making.set(releaseId, { done: job.done, total: job.total, error: job.error, gaveUp: job.state === 'failed' })
  }
  return making
}
