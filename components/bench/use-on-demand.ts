'use client'

import { useEffect, useRef, useState, type ComponentType } from 'react'

const QUIET_MS = 2000

/**
 * A part of the bench that the first load does without. It is fetched in a quiet moment, so that it is here when the network is
 * not, and at the latest when it is wanted; null until then, and where it did not come.
 */
export function useOnDemand<P>(load: () => Promise<ComponentType<P>>, wanted: boolean): ComponentType<P> | null {
  const [part, setPart] = useState<ComponentType<P> | null>(null)
  const loading = useRef(load)
  useEffect(() => {
    if (part) return
    let gone = false
    const fetchIt = () =>
      loading.current().then(
        (loaded) => void (gone || setPart(() => loaded)),
        () => {},
      )
    if (wanted) void fetchIt()
    const timer = setTimeout(() => void fetchIt(), QUIET_MS)
    return () => {
      gone = true
      clearTimeout(timer)
    }
  }, [part, wanted])
  return part
}
