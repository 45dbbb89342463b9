'use client'

import { useCallback, useEffect, useEffectEvent, useRef, useState, useSyncExternalStore } from 'react'
import { sendGrade } from './bench-api'
import { EMPTY_OUTBOX, GradeOutbox, type OutboxSnapshot, type RefusedGrade, type WaitingGrade } from './grade-outbox'

function browserStorage(): Storage | null {
  try {
    return window.localStorage
  } catch {
    return null
  }
}

const nothing = (): OutboxSnapshot => EMPTY_OUTBOX

/** The outbox of this person and campaign, sending what an earlier visit left behind; warns on leaving while grades wait. */
export function useOutbox(
  slug: string,
  personId: number,
  on: {
    refused: (grade: RefusedGrade) => void
    /** What an earlier visit left unsent. */
    found: (waiting: readonly WaitingGrade[]) => void
  },
) {
  const refused = useEffectEvent(on.refused)
  const found = useEffectEvent(on.found)
  const made = useRef<GradeOutbox>(null)
  const [outbox, setOutbox] = useState<GradeOutbox | null>(null)

  useEffect(() => {
    const box = new GradeOutbox({
      storage: browserStorage(),
      scope: `${slug}:${personId}`,
      send: (candidateId, body) => sendGrade({ slug, personId }, candidateId, body),
      onRefused: (grade) => refused(grade),
    })
    // The storage of the browser is only there after the first paint.
    // eslint-disable-next-line react-hooks/set-state-in-effect
    setOutbox(box)
    made.current = box
    if (box.snapshot().waiting.length > 0) found(box.snapshot().waiting)
    box.flush()
    const visible = () => document.visibilityState === 'visible' && box.flush()
    const leaving = (event: BeforeUnloadEvent) => {
      if (box.snapshot().waiting.length > 0) event.preventDefault()
    }
    window.addEventListener('online', box.flush)
    document.addEventListener('visibilitychange', visible)
    window.addEventListener('beforeunload', leaving)
    return () => {
      box.stop()
      window.removeEventListener('online', box.flush)
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
