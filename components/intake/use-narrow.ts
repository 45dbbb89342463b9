'use client'

import { useSyncExternalStore } from 'react'

/** Below Tailwind's md: a phone. */
const NARROW = '(max-width: 767.98px)'

const query = (): MediaQueryList | null => (typeof window.matchMedia === 'function' ? window.matchMedia(NARROW) : null)

function subscribe(tell: () => void): () => void {
  const list = query()
  list?.addEventListener('change', tell)
  return () => list?.removeEventListener('change', tell)
}

export const useNarrow = (): boolean =>
  useSyncExternalStore(
    subscribe,
    () => query()?.matches ?? false,
    () => false,
  )
