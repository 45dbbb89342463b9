'use client'

import { useEffect, useRef } from 'react'
import type { BenchCandidate } from '@/lib/work/queue/lend-next'

/** How many candidates after the present one have all their pictures fetched and decoded ahead. */
const AHEAD = 4

const urlsOf = (candidates: readonly BenchCandidate[]) =>
  candidates.flatMap(({ views }) => views.flatMap(({ url }) => (url ? [url] : [])))

/**
 * Holds the decoded images of what comes, so that the next candidate and each of its views appear at once. Pictures further on
 * are fetched into the browser's own cache in quiet moments, where they are found when the network is away.
 */
export function usePreloaded(upcoming: readonly BenchCandidate[]): void {
  const decoded = useRef(new Map<string, HTMLImageElement>())
  const fetched = useRef(new Set<string>())
  useEffect(() => {
    const held = decoded.current
    const wanted = new Set(urlsOf(upcoming.slice(0, AHEAD + 1)))
    for (const url of held.keys()) if (!wanted.has(url)) held.delete(url)
    for (const url of wanted) {
      if (held.has(url)) continue
      const image = new Image()
      image.src = url
      held.set(url, image)
      // One that fails is tried again when the bench shows it.
      image.decode?.().catch(() => held.delete(url))
    }
    const later = urlsOf(upcoming.slice(AHEAD + 1))
    const before = fetched.current
    fetched.current = new Set(later)
    for (const url of later) if (!before.has(url)) fetchQuietly(url, () => fetched.current.delete(url))
  }, [upcoming])
}

function fetchQuietly(url: string, onFailure: () => void): void {
  const image = new Image()
  image.fetchPriority = 'low'
  image.onerror = onFailure
  image.src = url
}
