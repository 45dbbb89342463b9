'use client'

import { useEffect, useEffectEvent, useState } from 'react'
import type { Look } from './bench-session'
import { breakOffer, type BreakOffer } from './kindness'

/** How often the time is looked at while an offer stands. */
const TICK_MS = 20_000
/** Of this window, so that a reload does not ask again. */
const KEY = 'ringside:break-declined'

function declinedBefore(): number {
  try {
    return Number(sessionStorage.getItem(KEY) ?? 0)
  } catch {
    return 0
  }
}

/** Offers a break until it is taken or declined, by button or Esc. It never stands in the way of a grade. */
export function useBreakOffer(given: readonly Look[]): { offer: BreakOffer | null; decline: () => void } {
  const [declinedAt, setDeclinedAt] = useState(0)
  const [now, setNow] = useState(0)
  const offer = now === 0 ? null : breakOffer(given, declinedAt, now)
  const decline = () => {
    const at = given.at(-1)?.at ?? 0
    setDeclinedAt(at)
    try {
      sessionStorage.setItem(KEY, String(at))
    } catch {
      // Offered again after a reload.
    }
  }
  useEffect(() => {
    const look = () => {
      setNow(Date.now())
      setDeclinedAt((before) => Math.max(before, declinedBefore()))
    }
    look()
    const timer = setInterval(look, TICK_MS)
    document.addEventListener('visibilitychange', look)
    return () => {
      clearInterval(timer)
      document.removeEventListener('visibilitychange', look)
    }
  }, [given])
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
