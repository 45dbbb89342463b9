'use client'

import { useState } from 'react'

export interface Selection {
  /** In the order of the list. */
  ids: number[]
  has: (id: number) => boolean
  /** With `range` everything from the one chosen last up to this one is selected. */
  toggle: (id: number, range: boolean) => void
  add: (ids: readonly number[]) => void
  clear: () => void
}

/** Which of the listed are selected; what leaves the list is selected no more. */
export function useSelection(listed: readonly number[]): Selection {
  const [chosen, setChosen] = useState<ReadonlySet<number>>(new Set())
  const [anchor, setAnchor] = useState<number | null>(null)
  const ids = listed.filter((id) => chosen.has(id))
  const add = (more: readonly number[]) => setChosen(new Set([...ids, ...more]))
  const toggle = (id: number, range: boolean) => {
    const [from, to] = [listed.indexOf(anchor ?? id), listed.indexOf(id)]
    setAnchor(id)
    if (range && from >= 0) return add(listed.slice(Math.min(from, to), Math.max(from, to) + 1))
    setChosen(new Set(chosen.has(id) ? ids.filter((one) => one !== id) : [...ids, id]))
  }
  return { ids, has: (id) => chosen.has(id), toggle, add, clear: () => setChosen(new Set()) }
}
