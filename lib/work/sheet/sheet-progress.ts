import 'server-only'
import type { Kysely } from 'kysely'
import { countFirstPass, listLensMarks } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import { wilsonInterval, type Interval } from '@/lib/science/agreement/binomial-intervals'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { firstPassOf } from './first-pass'

export interface SheetProgress {
  waiting: number
  sentOn: number
  dropped: number
}

export interface SheetCompleteness {
  /** Known lenses among the calibration stamps that were passed over, and how many of them were sent on. */
  lenses: number
  sentOn: number
  /** 95 % of the share, by Wilson; null without any. */
  interval: Interval | null
}

/** How far the first pass is; without calibration stamps, and without what a ruling has decided. Counters. */
export async function sheetProgress(db: Kysely<DB>, { campaign }: CampaignPermit<'read'>): Promise<SheetProgress> {
  const counts = await countFirstPass(db, campaign.id)
  return { waiting: counts.waiting, sentOn: counts['sent on'], dropped: counts.dropped }
}

/** What share of known lenses the first pass sends on, by the marks as they stand. Leads: it tells who saw what. */
export async function sheetCompleteness(
  db: Kysely<DB>,
  { campaign }: CampaignPermit<'lead'>,
): Promise<SheetCompleteness> {
  const marks = new Map<number, Awaited<ReturnType<typeof listLensMarks>>>()
  for (const mark of await listLensMarks(db, campaign.id)) {
    marks.set(mark.candidateId, [...(marks.get(mark.candidateId) ?? []), mark])
  }
  const states = [...marks.values()].map((standing) => firstPassOf(standing)).filter((state) => state !== 'waiting')
  const sentOn = states.filter((state) => state === 'sent on').length
  return { lenses: states.length, sentOn, interval: wilsonInterval(sentOn, states.length) }
}
