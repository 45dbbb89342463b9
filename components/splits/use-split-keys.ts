'use client'

import { useEffect, useEffectEvent } from 'react'
import { focusKind, SLIDER_KEYS } from '@/components/bench/bench-keys'
import { splitCommand, type SplitCommand } from './split-keys'

/** Listens on the window while `on`; never while somebody types, and never in place of a button's own key. */
export function useSplitKeys(on: boolean, onCommand: (command: SplitCommand) => void): void {
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented || isTyping(event.target)) return
    if (focusKind(event.target) === 'slider' && SLIDER_KEYS.includes(event.key)) return
    const command = splitCommand(event)
    if (!command) return
    event.preventDefault()
    onCommand(command)
  })
  useEffect(() => {
    if (!on) return
    const listen = (event: KeyboardEvent) => pressed(event)
    window.addEventListener('keydown', listen)
    return () => window.removeEventListener('keydown', listen)
  }, [on])
}

/** A choice of a ruling is an input that takes arrows and Space but no letters. */
function isTyping(target: EventTarget | null): boolean {
  if (target instanceof HTMLInputElement && target.type === 'radio') return false
  return focusKind(target) === 'text'
}
