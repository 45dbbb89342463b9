import type { MeanRule } from '@/lib/science/agreement/mean-rule'

const LETTERS = [
  { letter: 'N', points: 0 },
  { letter: 'C', points: 1 },
  { letter: 'B', points: 2 },
  { letter: 'A', points: 3 },
]

/** Where on the line from N to A the mean of the grades sets aside and confirms. */
export function RuleScale({ rule }: { rule: Pick<MeanRule, 'setAsideMean' | 'confirmMean'> }) {
  const aside = Math.min(3, Math.max(0, rule.setAsideMean)) / 3
  const confirm = Math.min(3, Math.max(0, rule.confirmMean)) / 3
  const usable = aside < confirm
  const zone = 'flex h-7 items-center justify-center overflow-hidden whitespace-nowrap px-1 text-note'
  return (
    <div
      role="img"
      aria-label={
        usable
          ? `Of 0 to 3 points, a mean up to ${rule.setAsideMean} sets aside and one from ${rule.confirmMean} confirms.`
          : 'The two thresholds do not fit together yet.'
      }
      className="flex flex-col gap-1"
    >
      {usable ? (
        <div className="flex overflow-hidden rounded-key">
          <div className={`${zone} bg-grade-n/45`} style={{ width: `${aside * 100}%` }}>
            set aside
          </div>
          <div
            className={`${zone} border-x border-page bg-line/60 text-mute`}
            style={{ width: `${(confirm - aside) * 100}%` }}
          >
            more looks
          </div>
          <div className={`${zone} bg-grade-a/35`} style={{ width: `${(1 - confirm) * 100}%` }}>
            confirmed
          </div>
        </div>
      ) : (
        <div className={`${zone} rounded-key border border-dashed border-alarm text-alarm`}>
          set aside must end below confirmed
        </div>
      )}
      <div className="figures flex justify-between text-note text-mute">
        {LETTERS.map(({ letter, points }) => (
          <span key={letter}>
            {letter}&thinsp;{points}
          </span>
        ))}
      </div>
    </div>
  )
}
