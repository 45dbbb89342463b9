'use client'

import { useCallback, useEffect, useReducer, useRef, useState, useSyncExternalStore } from 'react'
import type { LentSheet } from '@/lib/work/sheet/lend-sheet'
import type { PassersProgress } from '@/lib/work/sheet/sheet-progress'
import { MarkOutbox, type OutboxState } from './mark-outbox'
import { askSheet, giveBackSheet, type SheetOwner } from './sheet-api'
import { emptySession, PAGE, pageOf, restOf, step, type SheetSession, type SheetStep } from './sheet-session'

/** This page and the next lie ready. */
const READY = 2 * PAGE
const RENEW_MS = 5 * 60_000

export interface SheetDesk {
  session: SheetSession
  progress: PassersProgress
  outbox: OutboxState
  /** Everything that this person may pass over has come. */
  exhausted: boolean
  run: (action: SheetStep) => void
}

const NOTHING: OutboxState = { waiting: 0, trouble: null, refused: null }

export function useSheet(owner: SheetOwner, first: LentSheet & { progress: PassersProgress }): SheetDesk {
  const [session, dispatch] = useReducer(step, first, ({ stamps }) =>
    step(emptySession, { do: 'fill', stamps, passed: new Set() }),
  )
  const [progress, setProgress] = useState(first.progress)
  const [exhausted, setExhausted] = useState(first.stamps.length < READY)
  const { slug, personId } = owner
  const [outbox] = useState(() => new MarkOutbox({ slug, personId }, setProgress))
  const state = useSyncExternalStore(outbox.subscribe, outbox.state, () => NOTHING)

  useEffect(() => {
    const online = () => void outbox.flush()
    const gone = () => giveBackSheet({ slug, personId })
    window.addEventListener('online', online)
    window.addEventListener('pagehide', gone)
    return () => {
      outbox.stop()
      window.removeEventListener('online', online)
      window.removeEventListener('pagehide', gone)
    }
  }, [outbox, slug, personId])

  const fill = useCallback(async () => {
    await outbox.flush()
    const lent = await askSheet({ slug, personId }, READY).catch(() => null)
    if (!lent) return
    const passed = [...outbox.waiting()].filter(([, mark]) => mark !== 'taken back').map(([id]) => id)
    dispatch({ do: 'fill', stamps: lent.stamps, passed: new Set(passed) })
    setProgress(lent.progress)
    setExhausted(lent.stamps.length < READY)
  }, [outbox, slug, personId])

  const pages = session.done.length
  useEffect(() => {
    const soon = setTimeout(() => void fill(), 0)
    const renewing = setInterval(() => void fill(), RENEW_MS)
    return () => {
      clearTimeout(soon)
      clearInterval(renewing)
    }
  }, [fill, pages])

  usePreloadedPage(session)

  const run = (action: SheetStep) => {
    if (action.do === 'toggle') {
      const stamp = pageOf(session)[action.at]
      if (stamp) outbox.add([{ candidate: stamp.id, mark: session.sent.has(stamp.id) ? 'taken back' : 'sent on' }])
    }
    if (action.do === 'finish') {
      outbox.add(restOf(session).map(({ id }) => ({ candidate: id, mark: 'dropped' })))
    }
    if (action.do === 'undo') {
      const last = session.done.at(-1)
      outbox.add((last?.dropped ?? []).map((id) => ({ candidate: id, mark: 'taken back' })))
    }
    dispatch(action)
  }
  return { session, progress, outbox: state, exhausted, run }
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
