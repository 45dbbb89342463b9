'use client'

import { useCallback, useSyncExternalStore } from 'react'

const CHANGED = 'ringside-keys-changed'

function subscribe(listener: () => void): () => void {
  window.addEventListener(CHANGED, listener)
  window.addEventListener('storage', listener)
  return () => {
    window.removeEventListener(CHANGED, listener)
    window.removeEventListener('storage', listener)
  }
}

/** Whether single-key shortcuts work for this person in this browser (WCAG 2.2, success criterion 2.1.4). */
export function useKeySwitch(personId: number): [boolean, (on: boolean) => void] {
  const name = `ringside:bench-keys:${personId}`
  const on = useSyncExternalStore(
    subscribe,
    () => {
      try {
        return localStorage.getItem(name) !== 'off'
      } catch {
        return true
      }
    },
    () => true,
  )
  const set = useCallback(
    (value: boolean) => {
      try {
        if (value) localStorage.removeItem(name)
        else localStorage.setItem(name, 'off')
      } finally {
        window.dispatchEvent(new Event(CHANGED))
      }
    },
    [name],
  )
  return [on, set]
}
