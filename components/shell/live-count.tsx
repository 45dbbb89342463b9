'use client'

import { usePathname } from 'next/navigation'
import { useEffect } from 'react'
import useSWR from 'swr'

export interface CountSource {
  /** Answers an object of numbers. */
  url: string
  field: string
  initial: number
}

async function fetchCounts(url: string): Promise<Record<string, number>> {
  const response = await fetch(url)
  if (!response.ok) throw new Error(`${url} answered ${response.status}`)
  return response.json()
}

/** A number that keeps up while jobs and other people work: looked at again on every page and every 20 seconds. */
export function LiveCount({ url, field, initial }: CountSource) {
  const path = usePathname()
  const { data, mutate } = useSWR(url, fetchCounts, { refreshInterval: 20_000, dedupingInterval: 1000 })
  useEffect(() => {
    void mutate()
  }, [path, mutate])
  return <span className="figures text-small">{(data?.[field] ?? initial).toLocaleString('en')}</span>
}
