import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { permitCampaign, type CampaignPermit } from '@/lib/work/people/permission'
import type { Viewer } from '@/lib/work/people/viewer'
import { queueProgress } from './queue-progress'

/**
 * What is left for a person as the bench counts it, asked looks left out. Every page says this same number: beside one that leaves
 * calibration stamps out, the difference would tell how many are still to come.
 */
export async function leftToLookAt(db: Kysely<DB>, permit: CampaignPermit<'grade'>, asked: number): Promise<number> {
  return (await queueProgress(db, permit)).left - asked
}

/** The same for each of a person's campaigns. */
export async function withLeft<T extends { slug: string; left: number | null; asked: number | null }>(
  db: Kysely<DB>,
  viewer: Viewer | null,
  cards: readonly T[],
): Promise<T[]> {
  return Promise.all(
    cards.map(async (card) => {
      if (card.left === null) return card
      const permit = await permitCampaign(db, viewer, card.slug, 'grade')
      return { ...card, left: await leftToLookAt(db, permit, card.asked ?? 0) }
    }),
  )
}
