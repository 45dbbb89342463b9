import { useCallback, useEffect, useState } from 'react'
import { decodeWhatIf, type WhatIfColumns } from '@/lib/work/consensus/what-if-columns'
import type { ShownCandidate } from '@/lib/work/consensus/what-if'

async function ask(url: string): Promise<Response> {
  const response = await fetch(url, { cache: 'no-store' }).catch(() => {
    throw new Error('The server cannot be reached. Your thresholds are still here; try again in a moment.')
  })
  if (response.ok) return response
  const problem = (await response.json().catch(() => null)) as { detail?: unknown } | null
  throw new Error(typeof problem?.detail === 'string' ? problem.detail : `The server answered ${response.status}.`)
}

async function loadColumns(slug: string): Promise<WhatIfColumns> {
  const { body } = await ask(`/api/campaigns/${slug}/what-if`)
  try {
    const plain = new Response(body?.pipeThrough(new DecompressionStream('gzip')))
    return decodeWhatIf(new Uint8Array(await plain.arrayBuffer()))
  } catch {
    throw new Error('The numbers did not arrive whole. Try again.')
  }
}

export interface WhatIfNumbers {
  columns: WhatIfColumns | null
  /** what went wrong, in a sentence */
  fault: string | null
  /** reads the numbers anew; those that are here stay until then */
  again: () => void
}

/** The numbers of all candidates, read once. */
export function useWhatIf(slug: string): WhatIfNumbers {
  const [columns, setColumns] = useState<WhatIfColumns | null>(null)
  const [fault, setFault] = useState<string | null>(null)
  const [turn, setTurn] = useState(0)
  useEffect(() => {
    let current = true
    loadColumns(slug).then(
      (loaded) => {
        if (!current) return
        setColumns(loaded)
        setFault(null)
      },
      (error: Error) => current && setFault(error.message),
    )
    return () => {
      current = false
    }
  }, [slug, turn])
  return { columns, fault, again: useCallback(() => setTurn((before) => before + 1), []) }
}

/** Names and pictures of these candidates, as they come; what was asked for once is kept. */
export function useShown(
  slug: string,
  ids: readonly number[],
): { shown: Map<number, ShownCandidate>; fault: string | null } {
  const [shown, setShown] = useState<Map<number, ShownCandidate>>(new Map())
  const [fault, setFault] = useState<string | null>(null)
  const missing = ids.filter((id) => !shown.has(id)).join(',')
  useEffect(() => {
    if (!missing) return
    // A slider on the move passes by many lists: only one that stays a moment is asked for.
    let current = true
    const timer = setTimeout(async () => {
      try {
        const response = await ask(`/api/campaigns/${slug}/what-if/candidates?ids=${missing}`)
        const { candidates } = (await response.json()) as { candidates: ShownCandidate[] }
        if (!current) return
        setFault(null)
        setShown((before) => new Map([...before, ...candidates.map((one) => [one.id, one] as const)]))
      } catch (error) {
        if (current) setFault((error as Error).message)
      }
    }, 120)
    return () => {
      current = false
      clearTimeout(timer)
    }
  }, [slug, missing])
  return { shown, fault }
}
