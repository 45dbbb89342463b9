import 'server-only'
import type { Kysely } from 'kysely'
import {
  countCalibrationStamps,
  listCalibrationStamps,
  listEventDetails,
  listGalaxies,
  type GalaxyRow,
  type StampRow,
} from '@/db/queries/calibration'
import { listCampaignJobs } from '@/db/queries/jobs'
import type { DB } from '@/db/schema'
import { JOB } from '@/lib/platform/jobs/job-kinds'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { picturesOf, type PictureView } from '@/lib/work/stamps/candidate-pictures'
import type { GalaxyFilter } from './galaxy-filters'
import { PAINTED, type PaintingDone } from './paint-stamps'

export interface Galaxy extends GalaxyRow {
  /** Its first view. */
  picture: PictureView | null
}

export interface CalibrationPage {
  counts: { lenses: number; others: number; waiting: number }
  stamps: StampRow[]
  /** While stamps are being made. */
  work: { done: number; total: number } | null
  /** Why the work stopped, where it did. */
  fault: string | null
  last: (PaintingDone & { at: string }) | null
}

export const GALAXIES_SHOWN = 60
const STAMPS_SHOWN = 200

export async function calibrationPage(db: Kysely<DB>, { campaign }: CampaignPermit<'lead'>): Promise<CalibrationPage> {
  const [event] = await listEventDetails(db, campaign.id, PAINTED, 1)
  const jobs = (await listCampaignJobs(db, campaign.id)).filter(({ kind }) => kind === JOB.paintStamps)
  const job = jobs.find(({ state }) => state !== 'failed') ?? jobs[0]
  return {
    counts: await countCalibrationStamps(db, campaign.id),
    stamps: await listCalibrationStamps(db, campaign.id, STAMPS_SHOWN),
    work: job && job.state !== 'failed' ? { done: job.done, total: job.total } : null,
    fault: job?.state === 'failed' ? job.error : null,
    last: event ? { ...(JSON.parse(event.detail) as PaintingDone), at: event.at } : null,
  }
}

/** Galaxies to choose from, each with its first picture. */
export async function chooseGalaxies(
  db: Kysely<DB>,
  { campaign }: CampaignPermit<'lead'>,
  { which, name }: { which: GalaxyFilter; name: string | null },
): Promise<Galaxy[]> {
  const rows = await listGalaxies(db, campaign.id, { which, name, limit: GALAXIES_SHOWN })
  const pictures = await picturesOf(
    db,
    campaign,
    rows.map(({ id }) => id),
  )
  return rows.map((row) => ({ ...row, picture: pictures.get(row.id)?.views.find(({ url }) => url !== null) ?? null }))
}
