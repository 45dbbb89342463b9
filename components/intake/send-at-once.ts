'use client'

import { useSyncExternalStore } from 'react'

const KEY = 'ringside-send-at-once'
const listeners = new Set<() => void>()

function read(): boolean {
  try {
    return localStorage.getItem(KEY) === 'yes'
  } catch {
    return false
  }
}

function subscribe(listener: () => void): () => void {
  listeners.add(listener)
  return () => void listeners.delete(listener)
}

/** Whether this person, in this browser, sends without looking at the matching table first. */
export function useSendAtOnce(): [boolean, (atOnce: boolean) => void] {
  const atOnce = useSyncExternalStore(subscribe, read, () => false)
  return [
    atOnce,
    (next) => {
      try {
        localStorage.setItem(KEY, next ? 'yes' : 'no')
      } catch {
        // A browser that keeps nothing shows the table each time.
      }
      for (const listener of listeners) listener()
    },
  ]
}
