import { CANNOT_JUDGE, RUNGS } from '@/components/bench/grade-words'
import { percent } from '@/components/campaigns/in-words'
import type { GraderRecord } from '@/lib/work/calibration/grader-record'

/** How often each grade was given: letter, name, count and share, with a bar of the grade's brightness. */
export function GradeBars({ grades }: { grades: GraderRecord['grades'] }) {
  const all = grades.reduce((sum, { n }) => sum + n, 0)
  const most = Math.max(1, ...grades.map(({ n }) => n))
  return (
    <ul className="flex max-w-xl flex-col gap-1.5">
      {grades.map(({ letter, n }) => {
        const rung = RUNGS.find((one) => one.letter === letter)
        return (
          <li key={letter} className="grid grid-cols-[1.5rem_6.5rem_4rem_1fr] items-center gap-3 text-small">
            <span className={`font-bold ${rung?.ink ?? 'text-mute'}`}>{letter}</span>
            <span>{rung?.name ?? CANNOT_JUDGE}</span>
            <span className="figures text-right">{n.toLocaleString('en')}</span>
            <span className="flex items-center gap-2">
              <i
                aria-hidden="true"
                className={`block h-2 ${rung?.bar ?? 'bg-line'}`}
                style={{ width: `${(70 * n) / most}%` }}
              />
              <span className="figures whitespace-nowrap text-note text-mute">{percent(n, all)}</span>
            </span>
          </li>
        )
      })}
    </ul>
  )
}
