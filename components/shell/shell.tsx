import { CircleUser } from 'lucide-react'
import Link from 'next/link'
import type { ReactNode } from 'react'
import { Mark } from '@/components/ui/mark'
import type { CountSource } from './live-count'
import { NavLink } from './nav-link'
import { SignOutButton } from './sign-out-button'
import { ThemeSwitch } from './theme-switch'
import { WaitingLine, type WaitingSource } from './waiting-line'

export interface ShellLink {
  href: string
  label: string
  count?: CountSource
  exact?: boolean
}

/** The frame of every page but the bench: a quiet column of places at the left (a scrolling row on a phone). */
export function Shell({
  viewerName,
  heading,
  links,
  waiting,
  children,
}: {
  viewerName: string
  heading?: string
  links: ShellLink[]
  waiting?: WaitingSource
  children: ReactNode
}) {
  return (
    <div className="min-h-dvh md:grid md:grid-cols-[var(--spacing-nav,12.5rem)_minmax(0,1fr)]">
      <a
        href="#content"
        className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-50 focus:bg-raise focus:p-2"
      >
        Skip to the content
      </a>
      <header className="flex flex-col border-b border-line px-3 py-3 md:sticky md:top-0 md:h-dvh md:border-b-0 md:border-r md:py-4">
        <div className="flex items-center justify-between">
          <Link href="/" className="flex items-center gap-2.5 rounded-control px-2 py-1 text-lg font-bold">
            <Mark />
            Ringside
          </Link>
          <div className="flex md:hidden">
            <Link
              href="/account"
              aria-label={`Your account, ${viewerName}`}
              className="grid size-9 place-items-center rounded-control text-mute hover:bg-raise hover:text-text"
            >
              <CircleUser size={17} aria-hidden="true" />
            </Link>
            <ThemeSwitch />
            <SignOutButton />
          </div>
        </div>
        {heading ? <p className="mt-3 border-line px-3 text-note text-mute md:border-t md:pt-4">{heading}</p> : null}
        <nav aria-label={heading ?? 'Ringside'} className="mt-1 flex gap-1 overflow-x-auto py-1 md:mt-2 md:flex-col">
          {links.map((link) => (
            <NavLink key={link.href} {...link} />
          ))}
        </nav>
        {waiting ? <WaitingLine {...waiting} /> : null}
        <div className="mt-auto hidden items-center justify-between gap-2 pl-3 pt-4 md:flex">
          <Link
            href="/account"
            title="Your account"
            className="truncate rounded-control py-1 text-note text-mute hover:text-text"
          >
            {viewerName}
          </Link>
          <span className="flex">
            <ThemeSwitch />
            <SignOutButton />
          </span>
        </div>
      </header>
      <main id="content" className="min-w-0">
        {children}
      </main>
    </div>
  )
}
