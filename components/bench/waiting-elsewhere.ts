/** What waits in this browser, wherever on the site one is. Fetched when a page has been shown. */
import { scopesWaiting } from './bench-store'
import type { OutboxSnapshot } from './grade-outbox'
import { outboxOf } from './outboxes'

export interface WaitingElsewhere {
  /** Grades of this person on their way, in all campaigns. */
  waiting: number
  trouble: string | null
  /** Whether grades of somebody else wait here. */
  others: boolean
}

/**
 * Sends what waits of this person in any campaign, and tells how it goes.
 * @returns no longer
 */
export async function sendWaiting(personId: number, tell: (now: WaitingElsewhere) => void): Promise<() => void> {
  const scopes = await scopesWaiting().catch(() => [])
  const slugs = scopes
    .filter((scope) => scope.endsWith(`:${personId}`))
    .map((scope) => scope.slice(0, scope.lastIndexOf(':')))
  const others = scopes.length > slugs.length
  const boxes = slugs.map((slug) => outboxOf(slug, personId).outbox)
  const told = () => {
    const snapshots = boxes.map((box): OutboxSnapshot => box.snapshot())
    tell({
      waiting: snapshots.reduce((sum, { waiting }) => sum + waiting.length, 0),
      trouble: snapshots.find(({ trouble, waiting }) => trouble && waiting.length > 0)?.trouble?.sentence ?? null,
      others,
    })
  }
  const ends = boxes.map((box) => box.subscribe(told))
  await Promise.all(slugs.map((slug) => outboxOf(slug, personId).opened))
  told()
  for (const box of boxes) box.flush()
  return () => {
    for (const end of ends) end()
  }
}
