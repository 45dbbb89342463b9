import 'server-only'
import type { Kysely } from 'kysely'
import { countFirstPass, listLensMarks, listStampsToPass } from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
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

/** For who makes the pass: whole per cent, and what is to come with calibration stamps among it, so that nothing tells their number. */
export interface PassersProgress {
  toCome: number
  passedPercent: number
}

export async function passersProgress(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<PassersProgress> {
  const { campaign, viewer } = permit
  const { waiting, sentOn, dropped } = await sheetProgress(db, permit)
  const unseen = await listStampsToPass(db, { campaignId: campaign.id, personId: viewer.id, now: isoTime() })
  const share = campaign.calibration_share
  const stamps = Math.min(unseen.length, Math.round((waiting * share) / (1 - share)))
  const all = waiting + sentOn + dropped
  return { toCome: waiting + stamps, passedPercent: all > 0 ? Math.floor((100 * (sentOn + dropped)) / all) : 0 }
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
