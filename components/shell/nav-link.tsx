'use client'

import Link from 'next/link'
import { usePathname } from 'next/navigation'
import { useEffect, useRef } from 'react'
import { LiveCount, type CountSource } from './live-count'

export function NavLink({
  href,
  label,
  count,
  exact,
}: {
  href: string
  label: string
  count?: CountSource
  exact?: boolean
}) {
  const path = usePathname()
  const here = exact ? path === href : path === href || path.startsWith(`${href}/`)
  const link = useRef<HTMLAnchorElement>(null)
  // On a phone the places are a row that scrolls: the one where you are is in sight.
  useEffect(() => {
    if (here) link.current?.scrollIntoView({ block: 'nearest', inline: 'nearest' })
  }, [here])
  return (
    <Link
      ref={link}
      href={href}
      aria-current={here ? 'page' : undefined}
      className={`flex min-h-9 items-center justify-between gap-3 whitespace-nowrap rounded-control px-3 text-body ${
        here ? 'bg-raise text-text shadow-[inset_2px_0_0_var(--lamp)]' : 'text-mute hover:text-text'
      }`}
    >
      {label}
      {count ? <LiveCount {...count} /> : null}
    </Link>
  )
}
