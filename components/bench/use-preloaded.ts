'use client'

import { useEffect, useRef } from 'react'
import type { BenchCandidate } from '@/lib/work/queue/lend-next'

/** How many candidates after the present one have all their pictures fetched and decoded ahead. */
const AHEAD = 4

/** Holds the decoded images of what comes, so that the next candidate and each of its views appear at once. */
export function usePreloaded(upcoming: BenchCandidate[]): void {
  const images = useRef(new Map<string, HTMLImageElement>())
  useEffect(() => {
    const held = images.current
    const urls = upcoming.slice(0, AHEAD + 1).flatMap(({ views }) => views.flatMap(({ url }) => (url ? [url] : [])))
    const wanted = new Set(urls)
    for (const url of held.keys()) if (!wanted.has(url)) held.delete(url)
    for (const url of wanted) {
      if (held.has(url)) continue
      const image = new Image()
      image.src = url
      held.set(url, image)
      // One that fails is tried again when the bench shows it.
      image.decode?.().catch(() => held.delete(url))
    }
  }, [upcoming])
}
