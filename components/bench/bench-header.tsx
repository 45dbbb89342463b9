import { ArrowLeft } from 'lucide-react'
import Link from 'next/link'
import type { BenchCandidate } from '@/lib/work/queue/lend-next'
import { Coordinates } from './coordinates'

export function BenchHeader({
  slug,
  campaignName,
  counts,
  candidate,
  called,
}: {
  slug: string
  campaignName: string
  counts: { given: number; left: number }
  candidate: BenchCandidate | null
  /** Its name, where it has been told since. */
  called?: string
}) {
  const all = (counts.given + counts.left).toLocaleString('en')
  return (
    <header className="flex flex-wrap items-center justify-between gap-x-6 px-3 pt-2 md:px-6 md:pt-3 short:flex-nowrap short:gap-x-3 short:px-3 short:pt-0">
      <div className="flex min-w-0 items-center gap-3">
        <Link
          prefetch={false}
          href={`/campaigns/${slug}`}
          aria-label={`Leave the bench, to ${campaignName}`}
          title="Leave the bench"
          className="-ml-2 grid size-11 shrink-0 place-items-center rounded-control text-mute hover:text-text md:size-8"
        >
          <ArrowLeft size={18} aria-hidden="true" />
        </Link>
        <span className="hidden truncate text-small font-semibold lg:inline short:hidden">{campaignName}</span>
        <span className="whitespace-nowrap text-note text-mute">
          {/* Room for the whole count from the start, so that nothing moves at ten and at a hundred. */}
          <span className="figures inline-block" style={{ minWidth: `${all.length}ch` }}>
            {counts.given.toLocaleString('en')}
          </span>{' '}
          of <span className="figures">{all}</span>
          <span className="hidden sm:inline short:hidden"> graded by you</span>
        </span>
      </div>
      {candidate ? (
        <div className="flex min-w-0 flex-wrap items-center gap-x-4">
          <h1 className="figures truncate text-small font-semibold">{called ?? candidate.name}</h1>
          {/* On a phone the picture needs the room. */}
          <span className="max-sm:hidden short:hidden">
            <Coordinates key={candidate.id} raDeg={candidate.raDeg} decDeg={candidate.decDeg} />
          </span>
        </div>
      ) : null}
    </header>
  )
}
