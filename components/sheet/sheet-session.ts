/** What lies on the sheet and what has been done with it. Pure. */
import type { SheetStamp } from '@/lib/work/sheet/lend-sheet'

export const PAGE = 60

export interface DonePage {
  stamps: SheetStamp[]
  dropped: number[]
}

export interface SheetSession {
  /** In order; the first PAGE of them are the page. */
  supply: SheetStamp[]
  sent: ReadonlySet<number>
  done: DonePage[]
  /** Dropped on pages before those that can be brought back. */
  droppedBefore: number
  /** Place on the page. */
  at: number
  confirming: boolean
  enlarged: boolean
}

export const emptySession: SheetSession = {
  supply: [],
  sent: new Set(),
  done: [],
  droppedBefore: 0,
  at: 0,
  confirming: false,
  enlarged: false,
}

export type SheetStep =
  | { do: 'fill'; stamps: readonly SheetStamp[]; passed: ReadonlySet<number> }
  | { do: 'go'; to: number }
  | { do: 'toggle'; at: number }
  | { do: 'confirm'; on: boolean }
  | { do: 'enlarge'; on: boolean }
  /** `seen`: what had its picture in sight; the rest of the page is for nobody to drop. */
  | { do: 'finish'; seen: ReadonlySet<number> }
  /** What was done in this window before a reload. */
  | { do: 'recall'; done: DonePage[]; sent: readonly number[]; droppedBefore: number }
  | { do: 'undo' }

export const pageOf = ({ supply }: SheetSession): SheetStamp[] => supply.slice(0, PAGE)

/** Those of the page that would be dropped. */
export const restOf = (session: SheetSession, seen: ReadonlySet<number>): SheetStamp[] =>
  pageOf(session).filter(({ id }) => !session.sent.has(id) && seen.has(id))

/** Those of the page that nobody has seen: they stay. */
export const unseenOf = (session: SheetSession, seen: ReadonlySet<number>): SheetStamp[] =>
  pageOf(session).filter(({ id }) => !session.sent.has(id) && !seen.has(id))

/** `passed`: candidates that have been marked already, though the server may not know it yet. */
export function step(session: SheetSession, action: SheetStep): SheetSession {
  const page = pageOf(session)
  const within = (to: number) => Math.max(0, Math.min(page.length - 1, to))
  switch (action.do) {
    case 'fill': {
      const here = new Set([...session.supply, ...session.done.flatMap(({ stamps }) => stamps)].map(({ id }) => id))
      const more = action.stamps.filter(({ id }) => !here.has(id) && !action.passed.has(id))
      return more.length > 0 ? { ...session, supply: [...session.supply, ...more] } : session
    }
    case 'go':
      return { ...session, at: within(action.to), confirming: false }
    case 'toggle': {
      const stamp = page[action.at]
      if (!stamp) return session
      const sent = new Set(session.sent)
      if (!sent.delete(stamp.id)) sent.add(stamp.id)
      return { ...session, sent, at: action.at, confirming: false }
    }
    case 'confirm':
      return { ...session, confirming: action.on && page.length > 0, enlarged: false }
    case 'enlarge':
      return { ...session, enlarged: action.on && page.length > 0, confirming: false }
    case 'finish': {
      const dropped = restOf(session, action.seen).map(({ id }) => id)
      const unseen = unseenOf(session, action.seen)
      const gone = page.filter((stamp) => !unseen.includes(stamp))
      if (gone.length === 0) return { ...session, confirming: false }
      return {
        ...session,
        supply: [...unseen, ...session.supply.slice(page.length)],
        done: [...session.done, { stamps: gone, dropped }],
        at: 0,
        confirming: false,
        enlarged: false,
      }
    }
    case 'recall': {
      if (session.done.length > 0) return session
      const here = new Set(action.done.flatMap(({ stamps }) => stamps.map(({ id }) => id)))
      return {
        ...session,
        supply: session.supply.filter(({ id }) => !here.has(id)),
        done: [...action.done, ...session.done],
        sent: new Set([...action.sent, ...session.sent]),
        droppedBefore: action.droppedBefore,
      }
    }
    case 'undo': {
      const last = session.done.at(-1)
      if (!last) return session
      return {
        ...session,
        supply: [...last.stamps, ...session.supply],
        done: session.done.slice(0, -1),
        at: 0,
        confirming: false,
        enlarged: false,
      }
    }
  }
}
