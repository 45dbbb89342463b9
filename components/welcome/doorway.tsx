import type { ReactNode } from 'react'
import { Mark } from '@/components/ui/mark'

/** The ring that the product is named for: two arcs of one far galaxy about a near one. Decoration, always on black. */
function GreatRing() {
  return (
    <svg viewBox="0 0 600 600" className="h-full w-full" preserveAspectRatio="xMidYMid slice" aria-hidden="true">
      <defs>
        <radialGradient id="lens-light">
          <stop offset="0" stopColor="var(--text)" stopOpacity="0.95" />
          <stop offset="0.18" stopColor="var(--grade-a)" stopOpacity="0.55" />
          <stop offset="0.5" stopColor="var(--grade-b)" stopOpacity="0.14" />
          <stop offset="1" stopColor="var(--grade-b)" stopOpacity="0" />
        </radialGradient>
        <filter id="seeing" x="-20%" y="-20%" width="140%" height="140%">
          <feGaussianBlur stdDeviation="5" />
        </filter>
        <filter id="halo" x="-40%" y="-40%" width="180%" height="180%">
          <feGaussianBlur stdDeviation="22" />
        </filter>
      </defs>
      <circle cx="300" cy="300" r="150" fill="url(#lens-light)" />
      <g fill="none" stroke="var(--lamp)" strokeLinecap="round">
        <g filter="url(#halo)" opacity="0.5">
          <path d="M105 387A213 213 0 0 1 395 110" strokeWidth="30" />
          <path d="M510 280A212 212 0 0 1 380 495" strokeWidth="20" />
        </g>
        <g filter="url(#seeing)">
          <path d="M105 387A213 213 0 0 1 395 110" strokeWidth="17" />
          <path d="M510 280A212 212 0 0 1 380 495" strokeWidth="11" opacity="0.6" />
        </g>
      </g>
    </svg>
  )
}

/** The frame of the pages before somebody is signed in: what to do at the left, the dark room at the right. */
export function Doorway({ title, lead, children }: { title: string; lead?: ReactNode; children: ReactNode }) {
  return (
    <div className="grid min-h-dvh lg:grid-cols-[minmax(0,34rem)_minmax(0,1fr)]">
      <main className="flex flex-col justify-center gap-6 px-6 py-10 sm:px-14">
        <p className="flex items-center gap-2.5 text-lg font-bold">
          <Mark size={28} />
          Ringside
        </p>
        <div className="flex flex-col gap-2">
          <h1 className="text-display font-semibold">{title}</h1>
          {lead ? <div className="text-mute">{lead}</div> : null}
        </div>
        {children}
      </main>
      <div className="night hidden bg-bench lg:block">
        <GreatRing />
      </div>
    </div>
  )
}
