'use client'

import { useEffect, useEffectEvent } from 'react'
import { commandOf, endsBlink, focusKind, type Chooser, type Command } from './bench-keys'
import type { KeyChoice } from './key-choice'

/** Listens on the window while `on`. Blinking lasts as long as its key is held and ends with it, or when the window loses the focus. */
export function useBenchKeys({
  on,
  choice,
  chooser,
  onCommand,
  onBlinkEnd,
}: {
  on: boolean
  choice: KeyChoice
  chooser: Chooser
  onCommand: (command: Command) => void
  onBlinkEnd: () => void
}): void {
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented) return
    const command = commandOf(event, focusKind(event.target), chooser, choice)
    if (!command) return
    event.preventDefault()
    onCommand(command)
  })
  const released = useEffectEvent((key: string | null) => {
    if (key === null || endsBlink(key, choice)) onBlinkEnd()
  })
  useEffect(() => {
    if (!on) return
    const down = (event: KeyboardEvent) => pressed(event)
    const up = (event: KeyboardEvent) => {
      // Some browsers press a focused button when Space comes up, whatever became of the key going down.
      if (event.key === ' ' && focusKind(event.target) === 'page') event.preventDefault()
      released(event.key)
    }
    const lost = () => released(null)
    window.addEventListener('keydown', down)
    window.addEventListener('keyup', up)
    window.addEventListener('blur', lost)
    return () => {
      window.removeEventListener('keydown', down)
      window.removeEventListener('keyup', up)
      window.removeEventListener('blur', lost)
    }
  }, [on])
}
