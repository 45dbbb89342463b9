'use client'

import Link from 'next/link'
import { usePathname } from 'next/navigation'
import { useEffect } from 'react'
import useSWR from 'swr'

interface Waiting {
  asked: number
  mentions: number
}

export interface WaitingSource {
  /** The campaign's page. */
  home: string
  /** Answers what waits now. */
  url: string
  initial: Waiting
}

async function fetchWaiting(url: string): Promise<Waiting> {
  const response = await fetch(url)
  if (!response.ok) throw new Error(`${url} answered ${response.status}`)
  return response.json()
}

/** What others wait for from this person: looks asked of them, mentions not read. Nothing where nothing waits. */
export function WaitingLine({ home, url, initial }: WaitingSource) {
  const path = usePathname()
  const { data, mutate } = useSWR(url, fetchWaiting, { refreshInterval: 20_000, dedupingInterval: 1000 })
  useEffect(() => {
    void mutate()
  }, [path, mutate])
  const { asked, mentions } = data ?? initial
  const items = [
    { href: `${home}/bench`, number: asked, what: asked === 1 ? 'look asked of you' : 'looks asked of you' },
    { href: `${home}/mentions`, number: mentions, what: mentions === 1 ? 'unread mention' : 'unread mentions' },
  ].filter(({ number }) => number > 0)
  return (
    <div role="status" className="flex flex-wrap gap-x-3 px-3 md:flex-col md:pt-3">
      {items.map(({ href, number, what }) => (
        <Link
          key={href}
          href={href}
          className="flex min-h-7 items-center gap-1.5 text-note text-lamp underline decoration-lamp/40 underline-offset-4 hover:decoration-lamp"
        >
          <span className="figures font-semibold">{number.toLocaleString('en')}</span> {what}
        </Link>
      ))}
    </div>
  )
}
