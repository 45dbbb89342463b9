'use client'

import { useEffect, useEffectEvent, useRef, type Dispatch } from 'react'
import { askQueue, giveBackQueue } from './bench-api'
import type { BenchAction, BenchSession } from './bench-session'
import { firstsIn, type OutboxSnapshot } from './grade-outbox'
import { supplyDepth } from './supply-depth'

/** The most that the server lends at once. */
const MOST = 60
/** Well within the twenty minutes of a lease. */
const RENEW_MS = 5 * 60_000
/** Without any key, touch or mouse for so long, leases are left to run out, so that others get the candidates. */
const AWAY_MS = 15 * 60_000
const LOOK_AGAIN_MS = 20_000
const RETRY_MS = 5000
/** Lets a tab that closes return its leases before this one asks for them again. */
const SIBLING_MS = 1000

interface Around {
  slug: string
  personId: number
  session: BenchSession
  dispatch: Dispatch<BenchAction>
  outbox: () => OutboxSnapshot
  /** The server has answered. */
  onReached: () => void
}

/**
 * Keeps candidates coming: refills, renews the leases while somebody works here, looks again when everything left is with
 * others, and gives back what was not graded on leaving.
 */
export function useSupply({ slug, personId, session, dispatch, outbox, onReached }: Around): void {
  const { upcoming, counts, supply } = session
  const { target, low } = supplyDepth(session.given)
  const asking = useRef(false)
  const lastTouch = useRef(0)

  const ask = useEffectEvent(async (resumed: boolean) => {
    if (asking.current) return
    // What waits to be sent is still lent to this person and comes back first.
    const wanted = Math.min(MOST, Math.max(upcoming.length, target) + outbox().waiting.length)
    asking.current = true
    dispatch({ type: 'asked' })
    try {
      const supplied = await askQueue({ slug, personId }, wanted)
      onReached()
      const { waiting } = outbox()
      dispatch({
        type: 'supplied',
        supplied,
        asked: wanted,
        waiting: {
          candidateIds: waiting.map(({ candidateId }) => candidateId),
          firsts: firstsIn(waiting),
        },
        resumed,
      })
    } catch {
      dispatch({ type: 'ask failed' })
    } finally {
      asking.current = false
    }
  })

  const short = upcoming.length < low && counts.left > upcoming.length
  useEffect(() => {
    if (short && supply === 'ready') void ask(false)
  }, [short, supply])

  const empty = upcoming.length === 0
  useEffect(() => {
    const pause =
      supply === 'failed' ? RETRY_MS : (empty && supply === 'ready') || supply === 'dry' ? LOOK_AGAIN_MS : null
    if (pause === null) return
    const timer = setInterval(() => document.visibilityState === 'visible' && void ask(false), pause)
    return () => clearInterval(timer)
  }, [supply, empty])

  // One that words were written about stays lent, so that it comes back after a reload with its words.
  const heldIds = useEffectEvent(() =>
    upcoming.map(({ id }) => id).filter((id) => !session.drafts[id]?.remark.trim() && !session.drafts[id]?.tags.length),
  )
  const unmounting = useRef<ReturnType<typeof setTimeout>>(undefined)

  useEffect(() => {
    const siblings = 'BroadcastChannel' in window ? new BroadcastChannel(`ringside-bench:${slug}`) : null
    const touch = () => {
      const now = Date.now()
      // Back after a long absence: the leases may have run out.
      if (lastTouch.current > 0 && now - lastTouch.current > AWAY_MS) void ask(true)
      lastTouch.current = now
    }
    const leave = (ids: number[]) => {
      giveBackQueue({ slug, personId }, ids)
      siblings?.postMessage('left')
    }
    const hidden = () => leave(heldIds())
    const shown = (event: PageTransitionEvent) => event.persisted && void ask(true)
    const renew = setInterval(() => {
      if (Date.now() - lastTouch.current < AWAY_MS) void ask(false)
    }, RENEW_MS)
    let sibling: ReturnType<typeof setTimeout>
    if (siblings) siblings.onmessage = () => (sibling = setTimeout(() => void ask(false), SIBLING_MS))
    lastTouch.current = Date.now()
    clearTimeout(unmounting.current)
    // The page may come from a cache of an earlier visit, whose leases were given back.
    void ask(true)
    for (const kind of TOUCHES) window.addEventListener(kind, touch, { passive: true })
    window.addEventListener('pagehide', hidden)
    window.addEventListener('pageshow', shown)
    return () => {
      clearInterval(renew)
      clearTimeout(sibling)
      for (const kind of TOUCHES) window.removeEventListener(kind, touch)
      window.removeEventListener('pagehide', hidden)
      window.removeEventListener('pageshow', shown)
      if (siblings) siblings.onmessage = null
      // A tick later, because React in development unmounts and mounts again at once.
      const ids = heldIds()
      unmounting.current = setTimeout(() => {
        leave(ids)
        siblings?.close()
      })
    }
  }, [slug, personId])
}

const TOUCHES = ['keydown', 'pointerdown', 'pointermove'] as const
