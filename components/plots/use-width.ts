'use client'

import { useLayoutEffect, useRef, useState } from 'react'

/** Width of an element in CSS pixels as it is now; `first` until it has been measured. */
export function useWidth<Element extends HTMLElement>(first: number) {
  const ref = useRef<Element>(null)
  const [width, setWidth] = useState(first)
  useLayoutEffect(() => {
    const element = ref.current
    if (!element) return
    const measure = () => {
      const measured = Math.round(element.getBoundingClientRect().width)
      if (measured > 0) setWidth(measured)
    }
    measure()
    if (typeof ResizeObserver === 'undefined') return
    const observer = new ResizeObserver(measure)
    observer.observe(element)
    return () => observer.disconnect()
  }, [])
  return { ref, width }
}
