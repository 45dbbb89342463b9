'use client'

import { useEffect, useEffectEvent } from 'react'
import { focusKind } from '@/components/bench/bench-keys'

/** The keys 1 to 9 choose a view while `on`; never while somebody types, and never with a modifier. */
export function useViewKeys(on: boolean, onView: (index: number) => void): void {
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented || event.isComposing || focusKind(event.target) === 'text') return
    if (event.ctrlKey || event.altKey || event.metaKey || event.shiftKey) return
    const digit = /^[1-9]$/.exec(event.key)?.[0] ?? /^Digit([1-9])$/.exec(event.code)?.[1]
    if (!digit) return
    event.preventDefault()
    onView(Number(digit) - 1)
  })
  useEffect(() => {
    if (!on) return
    const listen = (event: KeyboardEvent) => pressed(event)
    window.addEventListener('keydown', listen)
    return () => window.removeEventListener('keydown', listen)
  }, [on])
}
