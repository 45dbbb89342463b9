'use client'

import { useEffect, useEffectEvent } from 'react'
import { focusKind } from '@/components/bench/bench-keys'
import { duplicateCommand, type DuplicateCommand } from './duplicate-keys'

/** Listens on the window while `on`; never while somebody types. */
export function useDuplicateKeys(on: boolean, onCommand: (command: DuplicateCommand) => void): void {
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    const { target } = event
    const isChoice = target instanceof HTMLInputElement && (target.type === 'radio' || target.type === 'checkbox')
    if (event.defaultPrevented || (focusKind(target) === 'text' && !isChoice)) return
    const command = duplicateCommand(event)
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
