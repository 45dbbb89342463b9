'use client'

import { useEffect, useEffectEvent, useState, useSyncExternalStore } from 'react'
import { sendGrade } from './bench-api'
import { EMPTY_OUTBOX, GradeOutbox, type OutboxSnapshot, type RefusedGrade } from './grade-outbox'

function browserStorage(): Storage | null {
  try {
    return window.localStorage
  } catch {
    return null
  }
}

const nothing = (): OutboxSnapshot => EMPTY_OUTBOX

/** The outbox of this person and campaign, sending what an earlier visit left behind; warns on leaving while grades wait. */
export function useOutbox(slug: string, personId: number, onRefused: (grade: RefusedGrade) => void) {
  const refused = useEffectEvent(onRefused)
  const [outbox, setOutbox] = useState<GradeOutbox | null>(null)

  useEffect(() => {
    const made = new GradeOutbox({
      storage: browserStorage(),
      scope: `${slug}:${personId}`,
      send: (candidateId, body) => sendGrade(slug, candidateId, body),
      onRefused: (grade) => refused(grade),
    })
    // The storage of the browser is only there after the first paint.
    // eslint-disable-next-line react-hooks/set-state-in-effect
    setOutbox(made)
    made.flush()
    const visible = () => document.visibilityState === 'visible' && made.flush()
    const leaving = (event: BeforeUnloadEvent) => {
      if (made.snapshot().waiting.length > 0) event.preventDefault()
    }
    window.addEventListener('online', made.flush)
    document.addEventListener('visibilitychange', visible)
    window.addEventListener('beforeunload', leaving)
    return () => {
      made.stop()
      window.removeEventListener('online', made.flush)
      document.removeEventListener('visibilitychange', visible)
      window.removeEventListener('beforeunload', leaving)
    }
  }, [slug, personId])

  const snapshot = useSyncExternalStore(outbox?.subscribe ?? neverChanges, outbox?.snapshot ?? nothing, nothing)
  return { outbox, snapshot }
}

const neverChanges = () => () => {}
