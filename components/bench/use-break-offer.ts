'use client'

import { useEffect, useEffectEvent, useState } from 'react'
import type { Look } from './bench-session'
import { breakOffer, type BreakOffer } from './kindness'

/** Offers a break until it is taken or declined, by button or Esc. It never stands in the way of a grade. */
export function useBreakOffer(given: readonly Look[]): { offer: BreakOffer | null; decline: () => void } {
  const [declinedAt, setDeclinedAt] = useState(0)
  const offer = breakOffer(given, declinedAt)
  const decline = () => setDeclinedAt(given.at(-1)?.at ?? 0)
  const pressed = useEffectEvent((event: KeyboardEvent) => {
    if (event.key !== 'Escape' || event.defaultPrevented || document.querySelector('[role="dialog"], textarea')) return
    event.preventDefault()
    decline()
  })
  useEffect(() => {
    if (!offer) return
    const down = (event: KeyboardEvent) => pressed(event)
    window.addEventListener('keydown', down, { capture: true })
    return () => window.removeEventListener('keydown', down, { capture: true })
  }, [offer])
  return { offer, decline }
}
