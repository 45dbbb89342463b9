import type { CandidateState } from '@/db/schema/intake'

const LOOK: Record<CandidateState, string> = {
  open: 'border-edge/60 text-mute',
  split: 'border-split/60 text-split',
  confirmed: 'border-lamp/70 text-lamp font-semibold',
  'set aside': 'border-edge/60 text-mute line-through decoration-1',
}

export function StatePill({ state }: { state: CandidateState }) {
  return (
    <span className={`inline-block whitespace-nowrap rounded-full border px-2 text-note ${LOOK[state]}`}>{state}</span>
  )
}
