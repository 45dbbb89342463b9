'use client'

import { useEffect, useLayoutEffect } from 'react'
import type { LightStore } from '@/components/light/light-store'
import { prefetchPlanes } from '@/components/light/prefetch-planes'
import { useInUse } from '@/components/light/use-light'
import type { BenchCandidate } from '@/lib/work/queue/lend-next'

/** How many candidates after the present one have their pixels fetched ahead. */
const AHEAD = 2

/** Tells Light which candidate is looked at and, only while it is in use, fetches the pixels of the next ones. */
export function useLightSupply(light: LightStore, candidateId: number | null, upcoming: BenchCandidate[]): void {
  const inUse = useInUse(light)
  useLayoutEffect(() => light.show(candidateId), [light, candidateId])
  useEffect(() => {
    if (!inUse) return
    const next = upcoming.filter(({ id }) => id !== candidateId).slice(0, AHEAD)
    for (const { planesUrl } of next) if (planesUrl) prefetchPlanes(planesUrl)
  }, [inUse, candidateId, upcoming])
}
