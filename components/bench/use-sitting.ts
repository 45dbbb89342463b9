'use client'

import { useCallback, useEffect, useEffectEvent, useRef, type Dispatch } from 'react'
import { askOwnAnswer } from './bench-api'
import { currentLook, sameAnswer, type BenchAction, type BenchSession, type Look } from './bench-session'
import { BenchStore, lookKey } from './bench-store'
import type { OutboxSnapshot } from './grade-outbox'
import { keepDrafts, keptDrafts } from './kept-drafts'

/** After so long without a grade a new sitting begins (our choice): undo does not reach into yesterday. */
const SITTING_MS = 4 * 3_600_000

function storage(): Storage | null {
  try {
    return window.localStorage
  } catch {
    return null
  }
}

/**
 * Keeps the looks of the sitting and what is typed, so that undo and words survive a reload. Whoever looks back at a look from
 * before the reload is told what stands at the server, where that differs.
 * @returns to be called once the outbox has been read, before which it is not known what is still on its way.
 */
export function useSitting({
  slug,
  personId,
  session,
  dispatch,
  outbox,
  onHint,
}: {
  slug: string
  personId: number
  session: BenchSession
  dispatch: Dispatch<BenchAction>
  outbox: () => OutboxSnapshot
  onHint: (hint: string) => void
}): () => Promise<void> {
  const scope = `${slug}:${personId}`
  const store = useRef<BenchStore>(null)
  const kept = useRef<Look[]>([])
  const unchecked = useRef(new Set<number>())
  const drafts = useRef(session.drafts)

  useEffect(() => {
    store.current = new BenchStore(scope)
    return () => void store.current?.close()
  }, [scope])

  const recall = useCallback(async () => {
    const now = Date.now()
    const written = keptDrafts(storage(), scope, now)
    const found = (await store.current?.looks().catch(() => [])) ?? []
    const fresh = now - (found.at(-1)?.at ?? now) <= SITTING_MS
    if (!fresh) await store.current?.forgetLooks().catch(() => {})
    const looks = fresh ? found : []
    // The server tells the first answer only, not that to a candidate that came back turned.
    for (const { candidate } of looks) if (!candidate.turned) unchecked.current.add(candidate.id)
    kept.current = [...looks, ...kept.current]
    drafts.current = { ...written, ...drafts.current }
    if (looks.length > 0 || Object.keys(written).length > 0) dispatch({ type: 'recalled', looks, drafts: written })
  }, [scope, dispatch])

  const { given } = session
  useEffect(() => {
    const before = new Map(kept.current.map((look) => [lookKey(look), look]))
    kept.current = given
    for (const look of given) {
      const key = lookKey(look)
      if (before.get(key) !== look) void store.current?.keepLook(look).catch(() => {})
      before.delete(key)
    }
    for (const look of before.values()) void store.current?.forgetLook(look).catch(() => {})
  }, [given])

  useEffect(() => {
    keepDrafts(storage(), scope, drafts.current, session.drafts, Date.now())
    drafts.current = session.drafts
  }, [scope, session.drafts])

  const back = session.lookingBack === null ? null : currentLook(session)?.candidate
  const lookedAt = back && !back.turned ? back.id : null
  const check = useEffectEvent(async (candidateId: number) => {
    const remembered = given.find(({ candidate }) => candidate.id === candidateId && !candidate.turned)?.answer
    if (!remembered || outbox().waiting.some((waiting) => waiting.candidateId === candidateId)) return
    const told = await askOwnAnswer({ slug, personId }, candidateId).catch(() => null)
    if (!told) return
    unchecked.current.delete(candidateId)
    if (!told.answer || !sameAnswer(told.answer, remembered)) {
      dispatch({ type: 'stands', candidateId, answer: told.answer })
      onHint(
        told.answer ? 'You have changed this grade elsewhere: this is what stands.' : 'No grade of yours stands there.',
      )
    } else if (!told.open) {
      onHint("You have seen the others' grades of this one since, so yours stands as it is. K returns.")
    }
  })
  useEffect(() => {
    if (lookedAt !== null && unchecked.current.has(lookedAt)) void check(lookedAt)
  }, [lookedAt])

  return recall
}
