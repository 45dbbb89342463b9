'use client'

import { useMemo, useSyncExternalStore } from 'react'
import { changeKey, readChoice, type KeyChoice } from './key-choice'

export interface Keys {
  /** Whether single-key shortcuts work at all. */
  on: boolean
  choice: KeyChoice
  setOn: (on: boolean) => void
  /** @returns why not, or null when it is done. */
  change: (action: string, key: string) => string | null
  reset: () => void
}

const CHANGED = 'ringside-keys-changed'
/** Where the browser keeps nothing they hold for this page. */
const here = new Map<string, string>()

function subscribe(listener: () => void): () => void {
  window.addEventListener(CHANGED, listener)
  window.addEventListener('storage', listener)
  return () => {
    window.removeEventListener(CHANGED, listener)
    window.removeEventListener('storage', listener)
  }
}

function load(name: string): string {
  try {
    return localStorage.getItem(name) ?? ''
  } catch {
    return here.get(name) ?? ''
  }
}

function store(name: string, on: boolean, choice: KeyChoice): void {
  const text = JSON.stringify({ on, choice })
  here.set(name, text)
  try {
    if (on && Object.keys(choice).length === 0) localStorage.removeItem(name)
    else localStorage.setItem(name, text)
  } catch {
    // Full or forbidden: they hold until the page goes.
  }
  window.dispatchEvent(new Event(CHANGED))
}

function read(text: string): { on: boolean; choice: KeyChoice } {
  if (text === 'off') return { on: false, choice: {} }
  try {
    const { on, choice } = JSON.parse(text || '{}') as { on?: unknown; choice?: unknown }
    return { on: on !== false, choice: readChoice(choice) }
  } catch {
    return { on: true, choice: {} }
  }
}

/** The keys of this person in this browser: switched off, or their own (WCAG 2.2, success criterion 2.1.4). */
export function useKeys(personId: number): Keys {
  const name = `ringside:bench-keys:${personId}`
  const text = useSyncExternalStore(
    subscribe,
    () => load(name),
    () => '',
  )
  return useMemo(() => {
    const { on, choice } = read(text)
    return {
      on,
      choice,
      setOn: (value) => store(name, value, choice),
      change: (action, key) => {
        const change = changeKey(choice, action, key)
        if ('refused' in change) return change.refused
        store(name, on, change.choice)
        return null
      },
      reset: () => store(name, on, {}),
    }
  }, [name, text])
}
