'use client'

import { useEffect, useEffectEvent, useReducer, useRef, useState, useSyncExternalStore } from 'react'
import type { LentSheet } from '@/lib/work/sheet/lend-sheet'
import type { PassersProgress } from '@/lib/work/sheet/sheet-progress'
import { keepPages, keptPages } from './kept-pages'
import { EMPTY_MARKS, type MarkOutbox, type OutboxState } from './mark-outbox'
import { marksOf } from './mark-outboxes'
import { askSheet, giveBackSheet, SheetTrouble, type SheetOwner } from './sheet-api'
import { emptySession, PAGE, pageOf, restOf, step, type SheetSession, type SheetStep } from './sheet-session'
import { useSeen, type Seen } from './use-seen'

/** This page and the next lie ready. */
const READY = 2 * PAGE
const RENEW_MS = 5 * 60_000
const RETRY_MS = 5000
/** Lets a tab that closes give its stamps back before this one asks for them again. */
const SIBLING_MS = 1000

/** What the sheet does; a page is finished with what has been seen of it. */
export type SheetCommandStep = Exclude<SheetStep, { do: 'finish' | 'recall' | 'fill' }> | { do: 'finish' }

export interface SheetDesk {
  session: SheetSession
  progress: PassersProgress
  outbox: OutboxState
  seen: Seen
  /** Everything that this person may pass over has come. */
  exhausted: boolean
  /** Why the next page has not come; null while all goes well. */
  trouble: string | null
  run: (action: SheetCommandStep) => void
}

const nothing = () => EMPTY_MARKS
const neverChanges = () => () => {}

export function useSheet({ slug, personId }: SheetOwner, first: LentSheet & { progress: PassersProgress }): SheetDesk {
  const [session, dispatch] = useReducer(step, first, ({ stamps }) =>
    step(emptySession, { do: 'fill', stamps, passed: new Set() }),
  )
  const [progress, setProgress] = useState(first.progress)
  const [exhausted, setExhausted] = useState(first.stamps.length < READY)
  const [trouble, setTrouble] = useState<string | null>(null)
  const [outbox, setOutbox] = useState<MarkOutbox | null>(null)
  const state = useSyncExternalStore(outbox?.subscribe ?? neverChanges, outbox?.state ?? nothing, nothing)
  const seen = useSeen()
  const asking = useRef(false)

  const fill = useEffectEvent(async () => {
    if (asking.current) return
    asking.current = true
    const marks = marksOf({ slug, personId })
    try {
      await marks.flush()
      const lent = await askSheet({ slug, personId }, READY)
      const passed = [...marks.waiting()].filter(([, mark]) => mark !== 'taken back').map(([id]) => id)
      dispatch({ do: 'fill', stamps: lent.stamps, passed: new Set(passed) })
      setProgress(lent.progress)
      setExhausted(lent.stamps.length < READY)
      setTrouble(null)
    } catch (error) {
      setTrouble(error instanceof SheetTrouble ? error.sentence : 'The server has trouble just now.')
    } finally {
      asking.current = false
    }
  })
  /** On this sheet and without a mark. */
  const heldIds = useEffectEvent(() => session.supply.map(({ id }) => id).filter((id) => !session.sent.has(id)))
  const unmounting = useRef<ReturnType<typeof setTimeout>>(undefined)

  useEffect(() => {
    const marks = marksOf({ slug, personId })
    marks.onProgress = setProgress
    // The storage of the browser is only there after the first paint.
    // eslint-disable-next-line react-hooks/set-state-in-effect
    setOutbox(marks)
    const kept = keptPages({ slug, personId })
    if (kept) dispatch({ do: 'recall', ...kept })
    const siblings = 'BroadcastChannel' in window ? new BroadcastChannel(`ringside-sheet:${slug}:${personId}`) : null
    let sibling: ReturnType<typeof setTimeout>
    if (siblings) siblings.onmessage = () => (sibling = setTimeout(() => void fill(), SIBLING_MS))
    const leave = (ids: readonly number[]) => {
      giveBackSheet({ slug, personId }, ids)
      siblings?.postMessage('left')
    }
    const hidden = () => leave(heldIds())
    const shown = (event: PageTransitionEvent) => event.persisted && void fill()
    const again = () => void fill()
    const visible = () => document.visibilityState === 'visible' && void fill()
    clearTimeout(unmounting.current)
    const opened = setTimeout(() => void marks.open().then(() => fill()))
    const renewing = setInterval(() => void fill(), RENEW_MS)
    window.addEventListener('online', again)
    window.addEventListener('pagehide', hidden)
    window.addEventListener('pageshow', shown)
    document.addEventListener('visibilitychange', visible)
    return () => {
      marks.onProgress = () => {}
      clearTimeout(opened)
      clearInterval(renewing)
      clearTimeout(sibling)
      window.removeEventListener('online', again)
      window.removeEventListener('pagehide', hidden)
      window.removeEventListener('pageshow', shown)
      document.removeEventListener('visibilitychange', visible)
      if (siblings) siblings.onmessage = null
      // A tick later, because React in development unmounts and mounts again at once.
      const ids = heldIds()
      unmounting.current = setTimeout(() => {
        leave(ids)
        siblings?.close()
      })
    }
  }, [slug, personId])

  const isTroubled = trouble !== null
  useEffect(() => {
    if (!isTroubled) return
    const again = setInterval(() => void fill(), RETRY_MS)
    return () => clearInterval(again)
  }, [isTroubled])

  const pages = session.done.length
  useEffect(() => {
    if (pages === 0) return
    const soon = setTimeout(() => void fill(), 0)
    return () => clearTimeout(soon)
  }, [pages])

  const untouched = useRef(true)
  useEffect(() => {
    // What was kept is recalled first.
    if (!untouched.current) keepPages({ slug, personId }, session)
    untouched.current = false
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [slug, personId, session.done, session.sent])

  usePreloadedPage(session)

  const run = (action: SheetCommandStep) => {
    if (action.do === 'toggle') {
      const stamp = pageOf(session)[action.at]
      if (stamp) outbox?.add([{ candidate: stamp.id, mark: session.sent.has(stamp.id) ? 'taken back' : 'sent on' }])
    }
    if (action.do === 'finish') {
      outbox?.add(restOf(session, seen.seen).map(({ id }) => ({ candidate: id, mark: 'dropped' })))
      return dispatch({ do: 'finish', seen: seen.seen })
    }
    if (action.do === 'undo') {
      const last = session.done.at(-1)
      outbox?.add((last?.dropped ?? []).map((id) => ({ candidate: id, mark: 'taken back' })))
    }
    dispatch(action)
  }
  return { session, progress, outbox: state, seen, exhausted, trouble, run }
}

/** The first pictures of the next page are in the browser before it comes. */
function usePreloadedPage({ supply }: SheetSession): void {
  const held = useRef(new Map<string, HTMLImageElement>())
  useEffect(() => {
    const wanted = new Set(supply.slice(PAGE, 2 * PAGE).flatMap(({ views }) => views[0]?.url ?? []))
    for (const url of held.current.keys()) if (!wanted.has(url)) held.current.delete(url)
    for (const url of wanted) {
      if (held.current.has(url)) continue
      const image = new Image()
      image.fetchPriority = 'low'
      image.src = url
      held.current.set(url, image)
    }
  }, [supply])
}
