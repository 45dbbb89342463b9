import type { EvidenceVerdict } from '@/lib/work/rulings/candidate-evidence'

const LETTERS = ['N', 'C', 'B', 'A']
const percent = (points: number) => `${(Math.min(3, Math.max(0, points)) / 3) * 100}%`

/** The mean of the grades with their spread on the line from N to A, and where the rule decides. */
export function MeanScale({ verdict }: { verdict: EvidenceVerdict }) {
  const { mean, spread, rule } = verdict
  if (mean === null || spread === null || rule.method !== 'mean') return null
  const low = Math.max(0, mean - spread)
  const high = Math.min(3, mean + spread)
  return (
    <div
      role="img"
      aria-label={`Mean ${mean.toFixed(2)} points with a spread of ${spread.toFixed(2)}, on a line from 0 (N) to 3 (A); the rule sets aside up to ${rule.setAsideMean} and confirms from ${rule.confirmMean}.`}
      className="flex flex-col gap-1"
    >
      <div className="relative h-9 rounded-key bg-line/60">
        <span
          className="absolute inset-y-0 left-0 rounded-l-key bg-grade-n/45"
          style={{ width: percent(rule.setAsideMean) }}
        />
        <span
          className="absolute inset-y-0 right-0 rounded-r-key bg-grade-a/35"
          style={{ left: percent(rule.confirmMean) }}
        />
        <span className="absolute inset-0 flex items-start justify-between px-2 pt-0.5 text-[0.6875rem] text-text">
          <span>set aside</span>
          <span>confirmed</span>
        </span>
        <span
          className="absolute top-[72%] h-0.5 -translate-y-1/2 bg-text/70"
          style={{ left: percent(low), width: percent(high - low) }}
        />
        <span
          className="absolute top-[72%] size-3 -translate-x-1/2 -translate-y-1/2 rounded-full border-2 border-page bg-text"
          style={{ left: percent(mean) }}
        />
      </div>
      <div className="figures flex justify-between text-note text-mute">
        {LETTERS.map((letter, points) => (
          <span key={letter}>
            {letter}&thinsp;{points}
          </span>
        ))}
      </div>
    </div>
  )
}
