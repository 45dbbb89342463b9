'use client'

import { useRouter, useSearchParams } from 'next/navigation'
import { useCallback, useRef, useState, useTransition } from 'react'
import { readTableState, writeTableState, type TableShape, type TableState } from './table-state'

/**
 * The state of a table, kept in the address: the page reads the rows it asks for. Each change is a step of the history, so that back
 * undoes it; what is typed into one field in one go is one step.
 */
export function useTableState(shape: TableShape) {
  const router = useRouter()
  const search = useSearchParams().toString()
  const [isPending, startTransition] = useTransition()
  const [seen, setSeen] = useState(search)
  const [state, setState] = useState(() => readTableState(shape, search))
  // Addresses that this table has asked for and that are still to come: whoever goes on meanwhile is not set back by them.
  const [coming, setComing] = useState<readonly string[]>([])
  const typing = useRef<{ field: string; query: string } | null>(null)

  if (search !== seen) {
    setSeen(search)
    const found = readTableState(shape, search)
    const query = writeTableState(shape, found)
    if (coming.includes(query)) setComing(coming.slice(coming.indexOf(query) + 1))
    // The address changed from outside: a link to this page, or the way back to it.
    else if (query !== writeTableState(shape, state)) setState(found)
  } else if (!isPending && coming.length > 0) setComing([])

  const update = useCallback(
    (change: Partial<TableState>, field?: string) => {
      // Other rows begin with their first page.
      const next = { ...state, ...(change.filters || change.sort ? { page: 0 } : {}), ...change }
      const before = writeTableState(shape, state)
      const query = writeTableState(shape, next)
      if (query === before) return
      const goesOn = field !== undefined && typing.current?.field === field && typing.current.query === before
      typing.current = field === undefined ? null : { field, query }
      setState(next)
      setComing((before) => [...before, query])
      const address = `${window.location.pathname}${query ? `?${query}` : ''}`
      startTransition(() => (goesOn ? router.replace : router.push)(address, { scroll: false }))
    },
    [router, shape, state],
  )
  return { state, update, isPending }
}
