'use client'

import Link from 'next/link'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { StatePill } from '@/components/ui/state-pill'
import { Notice } from '@/components/ui/notice'
import type { Move, RuleTrial } from '@/lib/work/consensus/try-rule'
import type { WhatIfColumns } from '@/lib/work/consensus/what-if-columns'
import { useShown } from './use-what-if'

/** Pictures shown at once. */
const PAGE = 24

const nameOf = ({ from, to }: Move) => `${from} → ${to}`

/** Which candidates would change, grouped by what from and to, the likeliest lens first. */
export function ChangedList({ slug, columns, trial }: { slug: string; columns: WhatIfColumns; trial: RuleTrial }) {
  const [wanted, setWanted] = useState<string | null>(null)
  const [page, setPage] = useState(0)
  const move = trial.moves.find((one) => nameOf(one) === wanted) ?? trial.moves[0]
  const pages = move ? Math.ceil(move.rows.length / PAGE) : 0
  const here = Math.min(page, Math.max(0, pages - 1))
  const rows = move ? move.rows.slice(here * PAGE, (here + 1) * PAGE) : []
  const { shown, fault } = useShown(
    slug,
    rows.map((row) => columns.ids[row]),
  )
  if (!move) return <p className="text-mute">No candidate would change its state.</p>
  return (
    <div className="flex flex-col gap-4">
      <div role="group" aria-label="Which changes to show" className="flex flex-wrap gap-2">
        {trial.moves.map((one) => (
          <button
            key={nameOf(one)}
            type="button"
            aria-pressed={one === move}
            onClick={() => {
              setWanted(nameOf(one))
              setPage(0)
            }}
            className="flex min-h-9 items-center gap-2 rounded-control border border-edge/50 px-3 text-small aria-pressed:border-lamp aria-pressed:bg-raise"
          >
            <span className="figures font-semibold">{one.rows.length.toLocaleString('en')}</span>
            <StatePill state={one.from} />
            <span aria-hidden="true">→</span>
            <span className="sr-only">to</span>
            <StatePill state={one.to} />
          </button>
        ))}
      </div>
      {fault ? <Notice tone="alarm">{fault}</Notice> : null}
      <ul className="grid grid-cols-[repeat(auto-fill,minmax(8rem,1fr))] gap-3">
        {rows.map((row) => {
          const id = columns.ids[row]
          const candidate = shown.get(id)
          const name = candidate?.name ?? `Candidate ${id}`
          return (
            <li key={id}>
              <Link
                href={`/campaigns/${slug}/candidates/${id}`}
                className="flex flex-col overflow-hidden rounded-tray bg-tray text-tray-text hover:outline-2 hover:outline-edge"
              >
                {candidate?.thumbnail ? (
                  <img
                    src={candidate.thumbnail}
                    alt=""
                    loading="lazy"
                    decoding="async"
                    className="pixelated aspect-square w-full object-contain"
                  />
                ) : (
                  <span className="flex aspect-square w-full items-center justify-center text-note">
                    {candidate ? 'no picture' : ''}
                  </span>
                )}
                <span className="flex flex-col px-2 py-1.5 text-note">
                  <span className="truncate font-semibold">{name}</span>
                  <span className="figures">{factsOf(columns, row)}</span>
                </span>
              </Link>
            </li>
          )
        })}
      </ul>
      {pages > 1 ? (
        <nav aria-label="Pages of changes" className="flex items-center gap-3 text-small">
          <Button disabled={here === 0} onClick={() => setPage(here - 1)}>
            Back
          </Button>
          <span className="text-mute">
            {(here * PAGE + 1).toLocaleString('en')} to{' '}
            {Math.min(move.rows.length, (here + 1) * PAGE).toLocaleString('en')} of{' '}
            {move.rows.length.toLocaleString('en')}
          </span>
          <Button disabled={here >= pages - 1} onClick={() => setPage(here + 1)}>
            Next
          </Button>
        </nav>
      ) : null}
    </div>
  )
}

/** `mean 1.67 of 3, p 4.1 %` */
function factsOf({ tallies, probabilities }: WhatIfColumns, row: number): string {
  const n = tallies.grades[row]
  const mean = n > 0 ? `mean ${(tallies.points[row] / n).toFixed(2)} of ${n}` : 'no grades'
  const p = probabilities[row]
  return Number.isNaN(p) ? mean : `${mean}, p ${p < 0.001 ? '< 0.1' : p > 0.999 ? '> 99.9' : (100 * p).toFixed(1)} %`
}
