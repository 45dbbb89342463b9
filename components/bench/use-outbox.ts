'use client'

import { useCallback, useEffect, useEffectEvent, useRef, useState, useSyncExternalStore } from 'react'
import {
  EMPTY_OUTBOX,
  type GradeOutbox,
  type OutboxSnapshot,
  type RefusedGrade,
  type WaitingGrade,
} from './grade-outbox'
import { outboxOf } from './outboxes'

const nothing = (): OutboxSnapshot => EMPTY_OUTBOX

/** The outbox of this person and campaign, shared with their other tabs; it lives on when the bench is left. */
export function useOutbox(
  slug: string,
  personId: number,
  on: {
    refused: (grade: RefusedGrade) => void
    called: (candidateId: number, called: string) => void
    found: (grades: readonly WaitingGrade[], where: 'earlier' | 'other tab') => void
    /** What an earlier visit left has been read. */
    opened: () => void
  },
) {
  const refused = useEffectEvent(on.refused)
  const called = useEffectEvent(on.called)
  const found = useEffectEvent(on.found)
  const opened = useEffectEvent(on.opened)
  const made = useRef<GradeOutbox>(null)
  /** Given at this bench, which knows of them. */
  const given = useRef(new Set<string>())
  const [outbox, setOutbox] = useState<GradeOutbox | null>(null)

  useEffect(() => {
    const held = outboxOf(slug, personId)
    let gone = false
    held.listener = { refused, called, foundElsewhere: (grades) => found(grades, 'other tab') }
    // The storage of the browser is only there after the first paint.
    // eslint-disable-next-line react-hooks/set-state-in-effect
    setOutbox(held.outbox)
    made.current = held.outbox
    void held.opened.then(() => {
      if (gone) return
      const earlier = held.outbox.snapshot().waiting.filter(({ body }) => !given.current.has(body.id))
      if (earlier.length > 0) found(earlier, 'earlier')
      opened()
    })
    return () => {
      gone = true
      held.listener = null
    }
  }, [slug, personId])

  const snapshot = useSyncExternalStore(outbox?.subscribe ?? neverChanges, outbox?.snapshot ?? nothing, nothing)
  /** As it is at the moment of asking, for what runs after an await. */
  const latest = useCallback(() => made.current?.snapshot() ?? EMPTY_OUTBOX, [])
  const add = (grade: WaitingGrade) => {
    given.current.add(grade.body.id)
    outbox?.add(grade)
  }
  return { outbox, snapshot, latest, add }
}

const neverChanges = () => () => {}
