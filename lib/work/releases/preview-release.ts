import 'server-only'
import type { Kysely } from 'kysely'
import {
  countCalibrationStamps,
  countJudged,
  countNewGrades,
  countUnjudged,
  listConfirmedWithoutPlace,
} from '@/db/queries/release-making'
import { findReleaseBefore, listMovedSince } from '@/db/queries/release-changes'
import { listReleases } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { acronymCaution, VISUAL_CAUTION } from './cautions'

export interface ReleasePreview {
  number: number
  confirmed: number
  setAside: number
  split: number
  open: number
  /** Neither graded nor ruled on: in no file. */
  unjudged: number
  /** Grades since the newest run: publishing runs the consensus first. */
  gradesSinceRun: number
  /** Confirmed candidates without a position: they keep it from being published. */
  unplaced: string[]
  before: number | null
  entered: string[]
  enteredCount: number
  left: string[]
  leftCount: number
  /** Whoever reads the files can tell these apart from candidates: they are not in them. */
  stamps: number
  cautions: { visual: string; acronym: string }
  /** Number of the release whose files are still being made. */
  beingMade: number | null
  /** What can be corrected or withdrawn, newest first. */
  correctable: { number: number; title: string }[]
  /** What the form of the release before said, to begin with. */
  last: { title: string; description: string; authors: string; licence: string; publisher: string } | null
}

const LISTED = 12

/** What would be in a release that is published now, and what has changed since the one before. */
export async function previewRelease(db: Kysely<DB>, permit: CampaignPermit<'lead'>): Promise<ReleasePreview> {
  const { campaign } = permit
  const releases = await listReleases(db, campaign.id)
  const number = (releases[0]?.number ?? 0) + 1
  const standing = releases.filter(({ givenUpReason }) => givenUpReason === null)
  const before = await findReleaseBefore(db, campaign.id, number)
  const states = new Map((await countJudged(db, campaign.id)).map(({ state, count }) => [state, count]))
  const withdrawn = new Set(standing.flatMap((one) => (one.kind === 'retraction' ? [one.corrects_id] : [])))
  const last = releases.find(({ kind }) => kind !== 'retraction')
  return {
    number,
    confirmed: states.get('confirmed') ?? 0,
    setAside: states.get('set aside') ?? 0,
    split: states.get('split') ?? 0,
    open: states.get('open') ?? 0,
    unjudged: await countUnjudged(db, campaign.id),
    gradesSinceRun: await countNewGrades(db, campaign.id),
    unplaced: await listConfirmedWithoutPlace(db, campaign.id),
    before: before?.number ?? null,
    ...(await listMovedSince(db, campaign.id, before?.id ?? null, LISTED)),
    stamps: await countCalibrationStamps(db, campaign.id),
    cautions: { visual: VISUAL_CAUTION, acronym: acronymCaution(campaign.acronym) },
    beingMade: standing.find(({ made }) => made === 0)?.number ?? null,
    correctable: standing
      .filter(({ id, kind }) => kind !== 'retraction' && !withdrawn.has(id))
      .map(({ number: of, title }) => ({ number: of, title })),
    last: last ? pick(last) : null,
  }
}

const pick = ({ title, description, authors, licence, publisher }: NonNullable<ReleasePreview['last']>) => ({
  title,
  description,
  authors,
  licence,
  publisher,
})
