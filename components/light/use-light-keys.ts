'use client'

import { useEffect, useEffectEvent } from 'react'
import { focusKind } from '@/components/bench/bench-keys'
import { lightCommandOf, runLight } from './light-keys'
import type { LightStore } from './light-store'

/** Keys of Light on pages of evidence, and X held to blink; never while somebody types. */
export function useLightKeys(on: boolean, light: LightStore, onBlink: (blinking: boolean) => void): void {
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.defaultPrevented || isTyping(event.target)) return
    const command = lightCommandOf(event)
    if (command) runLight(light, command)
    else if (isBlink(event)) onBlink(true)
    else return
    event.preventDefault()
  })
  const released = useEffectEvent(() => onBlink(false))
  useEffect(() => {
    if (!on) return
    const down = (event: KeyboardEvent) => pressed(event)
    const up = (event: KeyboardEvent) => {
      if (event.key.toLowerCase() === 'x') released()
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

const isBlink = ({ key, ctrlKey, altKey, metaKey, shiftKey, isComposing }: KeyboardEvent): boolean =>
  key.toLowerCase() === 'x' && !(ctrlKey || altKey || metaKey || shiftKey || isComposing)

/** A choice of a ruling is an input, but takes no letters. */
function isTyping(target: EventTarget | null): boolean {
  if (target instanceof HTMLInputElement && target.type === 'radio') return false
  return focusKind(target) === 'text'
}
