'use client'

import { createContext, useContext, type ReactNode } from 'react'

export interface MarkFocus {
  /** place of the mark that Tab comes to; the arrow keys move it */
  active: number
  onMark: (at: number, reading: string | null) => void
}

export const MarkFocusContext = createContext<MarkFocus>({ active: 0, onMark: () => {} })

/**
 * A part of a plot that has something to say: reached with the arrow keys or the pointer, told to screen readers and written
 * below the plot. `at` is its place in the plot's order, from 0.
 */
export function PlotMark({ at, reading, children }: { at: number; reading: string; children: ReactNode }) {
  const { active, onMark } = useContext(MarkFocusContext)
  return (
    <g
      data-mark={at}
      role="img"
      aria-label={reading}
      tabIndex={active === at ? 0 : -1}
      className="plot-mark outline-offset-1"
      onFocus={() => onMark(at, reading)}
      onPointerEnter={() => onMark(at, reading)}
      onBlur={() => onMark(at, null)}
      onPointerLeave={() => onMark(at, null)}
    >
      {children}
    </g>
  )
}
