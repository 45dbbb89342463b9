import Link from 'next/link'
import type { CandidateState } from '@/db/schema/intake'
import { percent } from './in-words'

export interface StateCounts {
  open: number
  split: number
  confirmed: number
  setAside: number
}

const PARTS: { key: keyof StateCounts; state: CandidateState; fill: string }[] = [
  { key: 'confirmed', state: 'confirmed', fill: 'bg-grade-a' },
  { key: 'split', state: 'split', fill: 'bg-split' },
  { key: 'open', state: 'open', fill: 'bg-edge/45' },
  { key: 'setAside', state: 'set aside', fill: 'bg-grade-n' },
]

/** How many candidates are in which state: a bar of four lengths, and the numbers that it draws. */
export function StateBar({ counts, campaignPath }: { counts: StateCounts; campaignPath: string }) {
  const total = PARTS.reduce((sum, { key }) => sum + counts[key], 0)
  return (
    <div className="flex flex-col gap-3">
      <div className="flex h-4 gap-0.5 overflow-hidden rounded-key" aria-hidden="true">
        {PARTS.filter(({ key }) => counts[key] > 0).map(({ key, fill }) => (
          <div key={key} className={`min-w-1 ${fill}`} style={{ flexGrow: counts[key], flexBasis: 0 }} />
        ))}
      </div>
      <ul className="grid grid-cols-2 gap-x-6 gap-y-2 sm:grid-cols-4">
        {PARTS.map(({ key, state, fill }) => (
          <li key={key}>
            <Link
              href={`${campaignPath}/candidates?state=${encodeURIComponent(state)}`}
              className="flex items-start gap-2 rounded-control py-1 hover:underline"
            >
              <i className={`mt-1.5 size-2.5 shrink-0 rounded-key ${fill}`} aria-hidden="true" />
              <span>
                <span className="figures text-title font-semibold leading-none">
                  {counts[key].toLocaleString('en')}
                </span>
                <span className="block text-note text-mute">
                  {state}, {percent(counts[key], total)}
                </span>
              </span>
            </Link>
          </li>
        ))}
      </ul>
    </div>
  )
}
