'use client'

import Link from 'next/link'
import { useEffect, useRef } from 'react'
import { StatePill } from '@/components/ui/state-pill'
import { VoteStrip } from '@/components/ui/vote-strip'
import { probabilityBeside } from '@/lib/science/agreement/weight-words'
import { describeOutcome } from '@/lib/work/rulings/describe-ruling'
import type { Splits } from '@/lib/work/rulings/list-splits'
import type { Selection } from './use-selection'

const figure = (value: number | null) => (value === null ? '–' : value.toFixed(2))

/** The splits, and below them what was ruled last, each one key or one click away. */
export function SplitList({
  splits,
  chosenId,
  hrefOf,
  selection,
}: {
  splits: Splits
  chosenId: number | null
  hrefOf: (id: number) => string
  selection: Selection
}) {
  const list = useRef<HTMLDivElement>(null)
  useEffect(() => {
    list.current?.querySelector('[aria-current="true"]')?.scrollIntoView?.({ block: 'nearest' })
  }, [chosenId])
  const { cases, ruled, total } = splits
  return (
    <div ref={list} className="max-h-[46dvh] overflow-y-auto border-line lg:max-h-none lg:min-h-0 lg:flex-1">
      {cases.length > 0 ? (
        <ol aria-label="Splits" className="border-t border-line">
          {cases.map((one) => (
            <li key={one.id} className={`relative border-b border-line ${selection.has(one.id) ? 'bg-lamp/10' : ''}`}>
              <label className="absolute inset-y-0 left-0 grid w-9 cursor-pointer place-items-center">
                <input
                  type="checkbox"
                  aria-label={`Select ${one.name}`}
                  checked={selection.has(one.id)}
                  onChange={(event) => {
                    const { shiftKey } = event.nativeEvent as MouseEvent
                    selection.toggle(one.id, shiftKey === true)
                  }}
                  className="size-4 accent-lamp"
                />
              </label>
              <Link
                href={hrefOf(one.id)}
                scroll={false}
                prefetch={false}
                aria-current={one.id === chosenId ? 'true' : undefined}
                className={`grid grid-cols-[3.5rem_minmax(0,1fr)] items-center gap-3 py-2.5 pl-9 pr-5 -outline-offset-2 ${
                  one.id === chosenId ? 'bg-raise shadow-[inset_3px_0_0_var(--split)]' : 'hover:bg-raise/60'
                }`}
              >
                <span className="block size-14 overflow-hidden rounded-key bg-black">
                  {one.picture?.url ? (
                    <img src={one.picture.url} alt="" loading="lazy" className="pixelated size-full object-contain" />
                  ) : null}
                </span>
                <span className="flex min-w-0 flex-col gap-1.5">
                  <span className="figures flex items-baseline justify-between gap-2 text-small">
                    <span className="truncate">{one.name}</span>
                    <span className="whitespace-nowrap text-mute" title={one.worth}>
                      {one.probability === null ? (
                        <>
                          mean <span className="text-text">{figure(one.mean)}</span> ± {figure(one.spread)}
                        </>
                      ) : (
                        <>
                          lens <span className="text-text">{probabilityBeside(one.probability)}</span>
                        </>
                      )}
                    </span>
                  </span>
                  <VoteStrip votes={one.votes} />
                </span>
              </Link>
            </li>
          ))}
        </ol>
      ) : null}
      {total > cases.length ? (
        <p className="px-5 py-3 text-note text-mute">
          These are the first {cases.length} of {total.toLocaleString('en')}. Rule on some and the rest come up.
        </p>
      ) : null}
      {ruled.length > 0 ? (
        <section aria-label="Ruled last" className="py-3">
          <h2 className="px-5 pb-1 text-note text-mute">Ruled last</h2>
          <ul>
            {ruled.map((one) => (
              <li key={one.candidateId}>
                <Link
                  href={hrefOf(one.candidateId)}
                  scroll={false}
                  prefetch={false}
                  aria-current={one.candidateId === chosenId ? 'true' : undefined}
                  className={`flex min-h-8 flex-wrap items-baseline gap-x-3 px-5 py-1 text-small -outline-offset-2 ${
                    one.candidateId === chosenId ? 'bg-raise shadow-[inset_3px_0_0_var(--lamp)]' : 'hover:bg-raise/60'
                  }`}
                >
                  <span className="figures [overflow-wrap:anywhere]">{one.name}</span>
                  <span className="ml-auto flex flex-wrap items-center gap-x-2 text-note text-mute">
                    {describeOutcome(one)} by {one.by}
                    {one.outcome === 'by verdict' ? <StatePill state={one.state} /> : null}
                  </span>
                </Link>
              </li>
            ))}
          </ul>
        </section>
      ) : null}
    </div>
  )
}
