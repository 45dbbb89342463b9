import type { ReactNode } from 'react'
import { Mark } from '@/components/ui/mark'
import { ALL_RELEASES } from './release-links'

/** The frame of pages that everybody may read: whose catalogue it is, and no navigation of the room behind it. */
export function PublicFrame({ place, href, children }: { place: string; href: string; children: ReactNode }) {
  return (
    <div className="mx-auto flex min-h-dvh max-w-6xl flex-col px-5 md:px-10">
      <a
        href="#content"
        className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-50 focus:bg-raise focus:p-2"
      >
        Skip to the content
      </a>
      <header className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 border-b border-line py-4">
        <a href={href} className="flex min-h-9 items-center gap-2.5 rounded-control font-semibold">
          <Mark />
          <span className="text-balance">{place}</span>
        </a>
        <p className="text-note text-mute">Candidate strong gravitational lenses</p>
      </header>
      <main id="content" className="flex min-w-0 flex-1 flex-col gap-10 py-8">
        {children}
      </main>
      <footer className="flex flex-wrap justify-between gap-x-8 gap-y-1 border-t border-line py-5 text-note text-mute">
        <p>Grades are visual judgements of images. They are not spectroscopic confirmations.</p>
        <p>
          Made with Ringside.{' '}
          <a href={ALL_RELEASES} className="underline underline-offset-4">
            All public releases
          </a>
        </p>
      </footer>
    </div>
  )
}
