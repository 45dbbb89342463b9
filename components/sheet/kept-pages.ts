/** What was done on the sheet in this window, so that the way back and the sums survive a reload. */
import type { SheetSession } from './sheet-session'
import type { SheetOwner } from './sheet-api'

/** Pages that can be brought back. */
const PAGES = 5

export interface KeptPages {
  done: SheetSession['done']
  sent: number[]
  /** Dropped on pages that are out of reach. */
  droppedBefore: number
}

const nameOf = ({ slug, personId }: SheetOwner) => `ringside:sheet-pages:${slug}:${personId}`

export function keepPages(owner: SheetOwner, { done, sent, droppedBefore }: SheetSession): void {
  const older = done.slice(0, -PAGES)
  const kept: KeptPages = {
    done: done.slice(-PAGES),
    sent: [...sent],
    droppedBefore: droppedBefore + older.reduce((sum, { dropped }) => sum + dropped.length, 0),
  }
  try {
    sessionStorage.setItem(nameOf(owner), JSON.stringify(kept))
  } catch {
    // A browser that keeps nothing: the way back ends with the page.
  }
}

export function keptPages(owner: SheetOwner): KeptPages | null {
  try {
    const kept = JSON.parse(sessionStorage.getItem(nameOf(owner)) ?? 'null') as KeptPages | null
    return kept && Array.isArray(kept.done) && Array.isArray(kept.sent) ? kept : null
  } catch {
    return null
  }
}
