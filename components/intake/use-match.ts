'use client'

import { useEffect, useRef, useState } from 'react'
import { matcher, type MatchDone, type MatchWork } from '@/lib/work/intake/match-work'

type Answer = { id: number; done?: MatchDone; fault?: string }

/** A thread where the browser has them, else here. */
function makeMatcher(onAnswer: (answer: Answer) => void): {
  ask: (id: number, work: MatchWork) => void
  end: () => void
} {
  if (typeof Worker === 'undefined') {
    const match = matcher()
    return { ask: (id, work) => void match(work).then((done) => onAnswer({ id, done })), end: () => {} }
  }
  const worker = new Worker(new URL('./match-worker.ts', import.meta.url), { type: 'module' })
  worker.onmessage = (event: MessageEvent<Answer>) => onAnswer(event.data)
  return { ask: (id, work) => worker.postMessage({ id, work }), end: () => worker.terminate() }
}

/** The newest answer to the newest question; while one is being worked on the last stays. */
export function useMatch(work: MatchWork): { done: MatchDone | null; fault: string | null; busy: boolean } {
  const thread = useRef<ReturnType<typeof makeMatcher> | null>(null)
  const asked = useRef(0)
  const [answer, setAnswer] = useState<Answer | null>(null)
  const [newest, setNewest] = useState(0)
  useEffect(() => {
    thread.current = makeMatcher((next) => {
      if (next.id === asked.current) setAnswer(next)
    })
    return () => thread.current?.end()
  }, [])
  useEffect(() => {
    asked.current++
    thread.current?.ask(asked.current, work)
    setNewest(asked.current)
  }, [work])
  return { done: answer?.done ?? null, fault: answer?.fault ?? null, busy: answer?.id !== newest }
}
