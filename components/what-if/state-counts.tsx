import type { Outcome } from '@/lib/science/agreement/mean-rule'
import type { RuleTrial } from '@/lib/work/consensus/try-rule'

const STATES: { state: Outcome; fill: string }[] = [
  { state: 'confirmed', fill: 'bg-grade-a' },
  { state: 'split', fill: 'bg-split' },
  { state: 'open', fill: 'bg-edge/45' },
  { state: 'set aside', fill: 'bg-grade-n' },
]

const signed = (change: number) =>
  change === 0 ? 'as now' : `${change > 0 ? '+' : '−'}${Math.abs(change).toLocaleString('en')}`

function Bar({ counts, thin }: { counts: Record<Outcome, number>; thin?: boolean }) {
  return (
    <div className={`flex gap-0.5 overflow-hidden rounded-key ${thin ? 'h-1.5 opacity-60' : 'h-3.5'}`}>
      {STATES.filter(({ state }) => counts[state] > 0).map(({ state, fill }) => (
        <div key={state} className={`min-w-1 ${fill}`} style={{ flexGrow: counts[state], flexBasis: 0 }} />
      ))}
    </div>
  )
}

/** How many would be in which state, large, and how many are now, small. */
export function StateCounts({ trial }: { trial: RuleTrial }) {
  return (
    <section aria-label="States under this rule" className="flex flex-col gap-2">
      <div aria-hidden="true" className="flex flex-col gap-1">
        <Bar counts={trial.then} />
        <Bar counts={trial.now} thin />
      </div>
      <dl className="grid grid-cols-4 gap-x-3 md:gap-x-6">
        {STATES.map(({ state, fill }) => {
          const change = trial.then[state] - trial.now[state]
          return (
            <div key={state} className="flex flex-col">
              <dt className="flex items-center gap-1.5 text-note text-mute">
                <i className={`size-2.5 shrink-0 rounded-key ${fill}`} aria-hidden="true" />
                {state}
              </dt>
              <dd className="flex flex-wrap items-baseline gap-x-2">
                <span className="figures text-title font-semibold">{trial.then[state].toLocaleString('en')}</span>
                <span
                  className={`whitespace-nowrap text-note ${change === 0 ? 'text-mute' : 'figures font-semibold text-lamp'}`}
                >
                  {signed(change)}
                </span>
                {change === 0 ? null : (
                  <span className="whitespace-nowrap text-note text-mute max-md:hidden">
                    now {trial.now[state].toLocaleString('en')}
                  </span>
                )}
              </dd>
            </div>
          )
        })}
      </dl>
    </section>
  )
}
