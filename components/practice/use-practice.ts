'use client'

import { useCallback, useEffect, useRef, useState } from 'react'
import { makeUid } from '@/components/bench/make-uid'
import { firstView } from '@/components/bench/first-view'
import type { GradeLetter } from '@/db/schema/grading'
import type { PracticeState, PracticeTruth } from '@/lib/work/calibration/practice'
import { fetchPractice, sendAnswer } from './practice-api'

export interface Practice {
  state: PracticeState
  truth: PracticeTruth | null
  /** What the server said no to, or that it cannot be reached. */
  trouble: string | null
  busy: boolean
  shownView: string | null
  chooseView: (key: string) => void
  answer: (letter: GradeLetter) => void
  goOn: () => void
  /** The view that is shown has its picture. */
  markSeen: () => void
}

/** A key that bounces comes faster than anybody can look. */
const LEAST_LOOK_MS = 120

/** One stamp, its answer, its truth, the next. Everything stays as it is while the server cannot be reached. */
export function usePractice(slug: string, personId: number, first: PracticeState): Practice {
  const [state, setState] = useState(first)
  const [truth, setTruth] = useState<PracticeTruth | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  const [busy, setBusy] = useState(false)
  const [view, setView] = useState<string | null>(null)
  const since = useRef(0)
  const seen = useRef<number>(null)
  const stamp = state.next
  const stampId = stamp?.id ?? null
  useEffect(() => {
    since.current = performance.now()
  }, [stampId])

  const during = useCallback(async (work: () => Promise<void>) => {
    setBusy(true)
    setTrouble(null)
    try {
      await work()
    } catch (error) {
      setTrouble(error instanceof Error ? error.message : String(error))
    } finally {
      setBusy(false)
    }
  }, [])

  return {
    state,
    truth,
    trouble,
    busy,
    shownView: view ?? firstView(stamp ?? undefined).view,
    chooseView: setView,
    answer: (grade) => {
      if (stamp === null || truth || busy || performance.now() - since.current < LEAST_LOOK_MS) return
      // As at the bench: nobody judges what is still on its way.
      if (grade !== 'U' && seen.current !== stamp.id && stamp.views.some(({ url }) => url !== null)) return
      const seconds = Math.min(86_400, Math.round((performance.now() - since.current) / 100) / 10)
      void during(async () =>
        setTruth(await sendAnswer({ slug, personId }, stamp.id, { id: makeUid(), grade, seconds })),
      )
    },
    markSeen: () => {
      seen.current = stampId
    },
    goOn: () => {
      if (busy) return
      void during(async () => {
        const next = await fetchPractice({ slug, personId })
        setState(next)
        setTruth(null)
        setView(null)
      })
    },
  }
}
