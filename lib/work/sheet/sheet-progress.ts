import 'server-only'
import type { Kysely } from 'kysely'
import { findMix } from '@/db/queries/mixing'
import { countFirstPass, countOnSheet, listLensMarks, listStampsToPass } from '@/db/queries/sheet'
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

/**
 * For who makes the pass. Calibration stamps are in both, and what lies on the person's sheet counts alike whatever it is, so that a
 * mark moves them by the same whether it is of a stamp or of a candidate.
 */
export interface PassersProgress {
  toCome: number
  /** Whole per cent. */
  passedPercent: number
}

export async function passersProgress(db: Kysely<DB>, permit: CampaignPermit<'grade'>): Promise<PassersProgress> {
  const { campaign, viewer } = permit
  const passer = { campaignId: campaign.id, personId: viewer.id, now: isoTime() }
  const { waiting, sentOn, dropped } = await sheetProgress(db, permit)
  const { stamps } = await findMix(db, campaign.id)
  const held = await countOnSheet(db, passer)
  const rest = Math.max(0, waiting - held.candidates)
  const unseen = (await listStampsToPass(db, passer)).length
  const share = campaign.calibration_share
  const mixedIn = (candidates: number, most: number) => Math.min(most, Math.round((candidates * share) / (1 - share)))
  const toCome = held.all + rest + mixedIn(rest, unseen)
  const candidates = waiting + sentOn + dropped
  const all = candidates + mixedIn(candidates, stamps)
  return { toCome, passedPercent: all > 0 ? Math.max(0, Math.floor((100 * (all - toCome)) / all)) : 0 }
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
