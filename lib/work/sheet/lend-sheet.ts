import 'server-only'
import { randomInt } from 'node:crypto'
import type { Kysely } from 'kysely'
import {
  clearSheet,
  countFirstPass,
  deleteExpiredSheetLeases,
  layOnSheet,
  listOnSheet,
  listStampsToPass,
  listToPass,
  renewSheet,
  type Passer,
} from '@/db/queries/sheet'
import type { DB } from '@/db/schema'
import type { Campaign } from '@/db/schema/campaigns'
import type { IsoTime } from '@/db/schema/values'
import { isoTime } from '@/lib/platform/clock'
import { withCalled } from '@/lib/work/campaigns/called'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { LEASE_MS } from '@/lib/work/queue/lease-time'
import { picturesOf } from '@/lib/work/stamps/candidate-pictures'
import { assertPasses, assertUsesSheet } from './may-pass'
import { MOST_ON_SHEET } from './mark-input'

/** A small stamp: nothing that others, the machine or the truth say of it; to graders a number for its name. */
export interface SheetStamp {
  id: number
  name: string
  views: { key: string; label: string; url: string | null; width: number; height: number }[]
}

export interface LentSheet {
  stamps: SheetStamp[]
  until: IsoTime
}

/**
 * What this person passes over next, as long as they keep asking: what lies on their sheet already, in the same order, and more up
 * to `count`. A candidate lies on one sheet at a time, so two people never get the same page at once. Calibration stamps are mixed in
 * at the campaign's share, each place drawn for itself, and may lie on several sheets. A page ends with the candidates.
 * @throws Problem 403 not picked for the first pass, 409 `sheet-off`
 */
export async function lendSheet(db: Kysely<DB>, permit: CampaignPermit<'grade'>, count: number): Promise<LentSheet> {
  assertUsesSheet(permit)
  await assertPasses(db, permit)
  const { campaign, viewer } = permit
  const wanted = Math.min(count, MOST_ON_SHEET)
  const lent = await db.transaction().execute(async (transaction) => {
    const passer = { campaignId: campaign.id, personId: viewer.id, now: isoTime() }
    const until = isoTime(LEASE_MS)
    await deleteExpiredSheetLeases(transaction, passer)
    await renewSheet(transaction, passer, until)
    const held = await listOnSheet(transaction, passer)
    const more = held.length < wanted ? await drawMore(transaction, campaign, passer, wanted - held.length) : []
    const ids = more.map(({ id }) => id)
    await layOnSheet(transaction, passer, ids, until)
    return { stamps: [...held, ...more].slice(0, wanted), until }
  })
  const pictures = await picturesOf(
    db,
    campaign,
    lent.stamps.map(({ id }) => id),
  )
  const stamps = (await withCalled(db, permit, lent.stamps)).map(({ id, name }) => ({
    id,
    name,
    views: (pictures.get(id)?.views ?? []).map(({ key, label, url, width, height }) => ({
      key,
      label,
      url,
      width,
      height,
    })),
  }))
  return { stamps, until: lent.until }
}

async function drawMore(transaction: Kysely<DB>, campaign: Campaign, passer: Passer, wanted: number) {
  const waiting = await drawWaiting(transaction, campaign, passer, wanted)
  const share = campaign.calibration_share
  const stamps = share > 0 && waiting.length > 0 ? await listStampsToPass(transaction, passer) : []
  const page: { id: number; name: string }[] = []
  while (page.length < wanted && waiting.length > 0) {
    const isStamp = stamps.length > 0 && randomInt(2 ** 32) / 2 ** 32 < share
    page.push(isStamp ? stamps.splice(randomInt(stamps.length), 1)[0] : waiting.shift()!)
  }
  return page
}

/** From here on what waits is too sparse to be come upon by walking. */
const FEW = 5000
const SPREAD = 2 ** 32

/**
 * From all over the campaign, else a calibration stamp would stand out among neighbours in intake: by the spread from
 * a place that is drawn, or all that waits drawn from where it is little. Where the score comes first, that mixes them.
 */
async function drawWaiting(transaction: Kysely<DB>, campaign: Campaign, passer: Passer, limit: number) {
  if (campaign.queue_order === 'score') return listToPass(transaction, passer, { order: 'score', limit })
  if ((await countFirstPass(transaction, campaign.id)).waiting <= FEW) {
    const all = await listToPass(transaction, passer, { order: 'id', limit: FEW })
    return Array.from({ length: Math.min(limit, all.length) }, () => all.splice(randomInt(all.length), 1)[0])
  }
  const ahead = await listToPass(transaction, passer, { order: { spreadFrom: randomInt(SPREAD) }, limit })
  if (ahead.length === limit) return ahead
  const known = new Set(ahead.map(({ id }) => id))
  const round = await listToPass(transaction, passer, { order: { spreadFrom: 0 }, limit })
  return [...ahead, ...round.filter(({ id }) => !known.has(id))].slice(0, limit)
}

/** Gives back these of the person's sheet, or all of it, so that others get them at once. */
export async function giveSheetBack(
  db: Kysely<DB>,
  { campaign, viewer }: CampaignPermit<'grade'>,
  candidateIds: readonly number[] | null = null,
): Promise<void> {
  await clearSheet(db, campaign.id, viewer.id, candidateIds)
}
