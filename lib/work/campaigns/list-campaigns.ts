import 'server-only'
import type { Kysely } from 'kysely'
import { listCampaigns as listCampaignRows } from '@/db/queries/campaigns'
import { countOpenCandidates } from '@/db/queries/queue'
import type { DB } from '@/db/schema'
import type { Role } from '@/db/schema/people'
import { isoTime } from '@/lib/platform/clock'
import { signInNeeded } from '@/lib/platform/problems/problem'
import type { Viewer } from '@/lib/work/people/viewer'
import { askerOf } from './asker'

export interface CampaignCard {
  slug: string
  name: string
  survey: string
  acronym: string
  role: Role
  candidates: number
  imaged: number
  gradesGiven: number
  /** Looks wanted altogether; a candidate that a ruling has decided wants no more than it has. */
  gradesWanted: number
  /** Left for this person to look at; null for a viewer, who grades nothing. */
  left: number | null
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
    rows.map(async ({ id, usesSheet, method, gradesWanted, looksGiven, looksWanted, confirmed, split, ...row }) => ({
      ...row,
      gradesGiven: looksGiven,
      gradesWanted: looksWanted,
      left:
        row.role === 'viewer'
          ? null
          : await countOpenCandidates(
              db,
              askerOf({ id, uses_sheet: usesSheet }, viewer.id, { method, gradesWanted }, now),
            ),
      confirmed: row.role === 'grader' ? null : confirmed,
      split: row.role === 'grader' ? null : split,
    })),
  )
}
