'use client'

import { useCallback, useEffect, useRef, useState } from 'react'

/** So much of a stamp in the window counts as in sight. */
const SHARE = 0.6

export interface Seen {
  seen: ReadonlySet<number>
  /** The picture of this stamp is there. */
  onPicture: (id: number) => void
  /** A stamp of the page, by which it is watched whether it comes into the window. */
  watch: (id: number, element: Element) => () => void
  /** It has been shown large. */
  show: (id: number) => void
}

/** Which stamps have been in sight: their picture was there and they were in the window at the same time, or before it. */
export function useSeen(): Seen {
  const [seen, setSeen] = useState<ReadonlySet<number>>(new Set())
  const pictures = useRef(new Set<number>())
  const inWindow = useRef(new Set<number>())
  const watched = useRef(new Map<Element, number>())
  const observer = useRef<IntersectionObserver>(null)
  const add = useCallback((id: number) => setSeen((old) => (old.has(id) ? old : new Set(old).add(id))), [])
  const note = useCallback(
    (id: number) => void (pictures.current.has(id) && inWindow.current.has(id) && add(id)),
    [add],
  )
  useEffect(() => () => observer.current?.disconnect(), [])

  const onPicture = useCallback(
    (id: number) => {
      pictures.current.add(id)
      note(id)
    },
    [note],
  )
  const watch = useCallback(
    (id: number, element: Element) => {
      if (!('IntersectionObserver' in window)) {
        inWindow.current.add(id)
        note(id)
        return () => {}
      }
      observer.current ??= new IntersectionObserver(
        (entries) => {
          for (const { target, intersectionRatio } of entries) {
            const met = watched.current.get(target)
            if (met === undefined) continue
            if (intersectionRatio >= SHARE) inWindow.current.add(met)
            else inWindow.current.delete(met)
            note(met)
          }
        },
        { threshold: [0, SHARE] },
      )
      watched.current.set(element, id)
      observer.current.observe(element)
      return () => {
        observer.current?.unobserve(element)
        watched.current.delete(element)
        inWindow.current.delete(id)
      }
    },
    [note],
  )
  return { seen, onPicture, watch, show: add }
}
