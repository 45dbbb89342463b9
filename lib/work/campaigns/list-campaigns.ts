import 'server-only'
import type { Kysely } from 'kysely'
import { countAsks } from '@/db/queries/asked-looks'
import { listCampaigns as listCampaignRows } from '@/db/queries/campaigns'
import { countOpenCandidates } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { Rule } from '@/db/schema/campaigns'
import type { Role } from '@/db/schema/people'
import { isoTime } from '@/lib/platform/clock'
import { signInNeeded } from '@/lib/platform/problems/problem'
import type { Viewer } from '@/lib/work/people/viewer'
import { askerOf } from './asker'
import { looksTold, type LooksTold } from './looks-told'

export interface CampaignCard {
  slug: string
  name: string
  survey: string
  acronym: string
  role: Role
  candidates: number
  imaged: number
  method: Rule['method']
  looks: LooksTold
  /** Left for this person to look at; null for a viewer, who grades nothing. */
  left: number | null
  /** Looks that somebody asks of this person; null for a viewer. */
  asked: number | null
  /** null for a grader, who learns states candidate by candidate after grading. */
  confirmed: number | null
  split: number | null
}

/** The campaigns that the person is in, newest first, with what says where each stands. */
export async function listCampaigns(db: Kysely<DB>, viewer: Viewer | null): Promise<CampaignCard[]> {
  if (!viewer) throw signInNeeded()
  const now = isoTime()
  const rows = await listCampaignRows(db, viewer.id)
  return Promise.all(
    rows.map(
      async ({ id, usesSheet, gradesWanted, looksGiven, looksWanted, looksWaiting, confirmed, split, ...row }) => ({
        ...row,
        looks: looksTold({ given: looksGiven, wanted: looksWanted, waiting: looksWaiting }, row.role, row.method),
        left:
          row.role === 'viewer'
            ? null
            : await countOpenCandidates(
                db,
                askerOf({ id, uses_sheet: usesSheet }, viewer.id, { method: row.method, gradesWanted }, now),
              ),
        asked: row.role === 'viewer' ? null : (await countAsks(db, { campaignId: id, personId: viewer.id })).open,
        confirmed: row.role === 'grader' ? null : confirmed,
        split: row.role === 'grader' ? null : split,
      }),
    ),
  )
}
