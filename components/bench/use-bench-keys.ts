'use client'

import { useEffect, useEffectEvent } from 'react'
import { commandOf, focusKind, type Chooser, type Command } from './bench-keys'

/** Listens on the window while `on`. Blinking lasts as long as its key is held and ends with it, or when the window loses the focus. */
export function useBenchKeys({
  on,
  chooser,
  onCommand,
  onBlinkEnd,
}: {
  on: boolean
  chooser: Chooser
  onCommand: (command: Command) => void
  onBlinkEnd: () => void
}): void {
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented) return
    const command = commandOf(event, focusKind(event.target), chooser)
    if (!command) return
    event.preventDefault()
    onCommand(command)
  })
  const released = useEffectEvent(() => onBlinkEnd())
  useEffect(() => {
    if (!on) return
    const down = (event: KeyboardEvent) => pressed(event)
    const up = (event: KeyboardEvent) => {
      // Some browsers press a focused button when Space comes up, whatever became of the key going down.
      if (event.key === ' ' && focusKind(event.target) === 'page') event.preventDefault()
      if (event.key === ' ' || event.key.toLowerCase() === 'x') released()
    }
    const lost = () => released()
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
