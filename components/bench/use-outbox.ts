'use client'

import { useCallback, useEffect, useEffectEvent, useRef, useState, useSyncExternalStore } from 'react'
import { sendGrade } from './bench-api'
import { BenchStore } from './bench-store'
import { exclusively } from './exclusively'
import {
  EMPTY_OUTBOX,
  GradeOutbox,
  type OutboxSnapshot,
  type RefusedGrade,
  type TabMessage,
  type WaitingGrade,
} from './grade-outbox'

function olderStorage(): Storage | null {
  try {
    return window.localStorage
  } catch {
    return null
  }
}

const nothing = (): OutboxSnapshot => EMPTY_OUTBOX

/**
 * The outbox of this person and campaign, shared with their other tabs, sending what an earlier visit left behind. It warns on
 * leaving where grades wait that the browser does not keep.
 */
export function useOutbox(
  slug: string,
  personId: number,
  on: {
    refused: (grade: RefusedGrade) => void
    found: (grades: readonly WaitingGrade[], where: 'earlier' | 'other tab') => void
    /** What an earlier visit left has been read. */
    opened: () => void
  },
) {
  const refused = useEffectEvent(on.refused)
  const found = useEffectEvent(on.found)
  const opened = useEffectEvent(on.opened)
  const made = useRef<GradeOutbox>(null)
  const [outbox, setOutbox] = useState<GradeOutbox | null>(null)

  useEffect(() => {
    const scope = `${slug}:${personId}`
    const tabs = 'BroadcastChannel' in globalThis ? new BroadcastChannel(`ringside-outbox:${scope}`) : null
    let gone = false
    const box = new GradeOutbox({
      store: new BenchStore(scope),
      older: olderStorage(),
      scope,
      send: (candidateId, body) => sendGrade({ slug, personId }, candidateId, body),
      exclusively: (work) => exclusively(`ringside-outbox:${scope}`, work),
      tell: (message) => void (gone || tabs?.postMessage(message)),
      onRefused: (grade) => void (gone || refused(grade)),
      onFound: (grades, where) => void (gone || found(grades, where)),
    })
    if (tabs) tabs.onmessage = ({ data }: MessageEvent<TabMessage>) => void box.hear(data)
    // The storage of the browser is only there after the first paint.
    // eslint-disable-next-line react-hooks/set-state-in-effect
    setOutbox(box)
    made.current = box
    void box.open().then(() => gone || opened())
    const visible = () => document.visibilityState === 'visible' && box.flush()
    const leaving = (event: BeforeUnloadEvent) => {
      const { waiting, kept } = box.snapshot()
      if (waiting.length > 0 && !kept) event.preventDefault()
    }
    window.addEventListener('online', box.flush)
    window.addEventListener('pageshow', box.flush)
    document.addEventListener('visibilitychange', visible)
    window.addEventListener('beforeunload', leaving)
    return () => {
      gone = true
      box.stop()
      tabs?.close()
      window.removeEventListener('online', box.flush)
      window.removeEventListener('pageshow', box.flush)
      document.removeEventListener('visibilitychange', visible)
      window.removeEventListener('beforeunload', leaving)
    }
  }, [slug, personId])

  const snapshot = useSyncExternalStore(outbox?.subscribe ?? neverChanges, outbox?.snapshot ?? nothing, nothing)
  /** As it is at the moment of asking, for what runs after an await. */
  const latest = useCallback(() => made.current?.snapshot() ?? EMPTY_OUTBOX, [])
  return { outbox, snapshot, latest }
}

const neverChanges = () => () => {}
