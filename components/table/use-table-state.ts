'use client'

import { useRouter, useSearchParams } from 'next/navigation'
import { useCallback, useState, useTransition } from 'react'
import { readTableState, writeTableState, type TableShape, type TableState } from './table-state'

/**
 * The state of a table, kept in the address. Who sorts and filters decides how: `browser` only writes the address, `server`
 * goes there, so that the page reads the other rows. Both replace the entry of the history: going back leaves the table.
 */
export function useTableState(shape: TableShape, worker: 'browser' | 'server') {
  const router = useRouter()
  const search = useSearchParams().toString()
  const [isPending, startTransition] = useTransition()
  const [seen, setSeen] = useState(search)
  const [state, setState] = useState(() => readTableState(shape, search))

  // The address changed from outside: a link to this page, or the way back to it.
  if (search !== seen) {
    setSeen(search)
    const found = readTableState(shape, search)
    if (writeTableState(shape, found) !== writeTableState(shape, state)) setState(found)
  }

  const update = useCallback(
    (change: Partial<TableState>) => {
      // Other rows begin with their first page.
      const next = { ...state, ...(change.filters || change.sort ? { page: 0 } : {}), ...change }
      setState(next)
      const query = writeTableState(shape, next)
      const address = `${window.location.pathname}${query ? `?${query}` : ''}`
      if (worker === 'browser') window.history.replaceState(null, '', address)
      else startTransition(() => router.replace(address, { scroll: false }))
    },
    [router, shape, state, worker],
  )
  return { state, update, isPending }
}
