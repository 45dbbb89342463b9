'use client'

import { useCallback, useEffect, useRef } from 'react'

const MOST_SECONDS = 86_400

/** Seconds for which the thing named by `key` has been on a visible page, to a tenth. */
export function useVisibleSeconds(key: number | null): () => number {
  const spent = useRef(0)
  const since = useRef<number | null>(null)
  useEffect(() => {
    const now = () => performance.now()
    const visible = () => document.visibilityState === 'visible'
    spent.current = 0
    since.current = visible() ? now() : null
    const change = () => {
      if (visible()) since.current ??= now()
      else if (since.current !== null) {
        spent.current += now() - since.current
        since.current = null
      }
    }
    document.addEventListener('visibilitychange', change)
    return () => document.removeEventListener('visibilitychange', change)
  }, [key])
  return useCallback(() => {
    const running = since.current === null ? 0 : performance.now() - since.current
    return Math.min(MOST_SECONDS, Math.round((spent.current + running) / 100) / 10)
  }, [])
}
