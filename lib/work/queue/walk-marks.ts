import type { Kysely } from 'kysely'
import type { Asker } from '@/db/queries/queue'
import type { Place } from '@/db/queries/queue-walk'
import type { DB } from '@/db/schema'

/** Where a person's walk along an index found something last. Marks only spare work: without one a walk begins at the head. */
export class WalkMark {
  place: Place | null = null
  #lookedBack = -Infinity

  /** Whether what lies before the place may be gone over again now; seldom, where it would be in vain each time. */
  mayLookBack(): boolean {
    if (Math.abs(Date.now() - this.#lookedBack) < LOOK_BACK_MS) return false
    this.#lookedBack = Date.now()
    return true
  }
}

const LOOK_BACK_MS = 30_000
const MOST_KEPT = 20_000

export type WalkMarks = (asker: Asker, walk: string) => WalkMark

const kept = new WeakMap<Kysely<DB>, Map<string, WalkMark>>()

/** The marks of this process for a database. */
export function walkMarks(db: Kysely<DB>): WalkMarks {
  const marks = kept.get(db) ?? new Map<string, WalkMark>()
  kept.set(db, marks)
  return ({ campaignId, personId, gradesWanted, usesSheet }, walk) => {
    const key = [campaignId, personId, gradesWanted, usesSheet, walk].join(' ')
    const known = marks.get(key)
    if (known) return known
    if (marks.size >= MOST_KEPT) marks.clear()
    const mark = new WalkMark()
    marks.set(key, mark)
    return mark
  }
}
