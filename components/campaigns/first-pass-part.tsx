import { ButtonLink } from '@/components/ui/button'
import { ProgressBar } from '@/components/ui/progress-bar'
import type { SheetCompleteness, SheetProgress } from '@/lib/work/sheet/sheet-progress'
import { counted, percent } from './in-words'
import { Part } from './overview-parts'

const many = (count: number) => count.toLocaleString('en')

/** How far the first pass is, and what it misses by the calibration stamps that were mixed in. */
export function FirstPassPart({
  progress,
  completeness,
  campaignPath,
  passes,
}: {
  progress: SheetProgress
  /** null for viewers */
  completeness: SheetCompleteness | null
  campaignPath: string
  passes: boolean
}) {
  const { waiting, sentOn, dropped } = progress
  const all = waiting + sentOn + dropped
  const interval = completeness?.interval
  return (
    <Part
      title={waiting === 0 ? 'The first pass is through' : `${percent(sentOn + dropped, all)} through the first pass`}
    >
      <ProgressBar done={sentOn + dropped} total={all} label="Passed over" />
      <p className="text-small text-mute">
        <span className="figures text-text">{many(sentOn)}</span> sent on to the bench,{' '}
        <span className="figures text-text">{many(dropped)}</span> not sent on and set aside,{' '}
        <span className="figures text-text">{many(waiting)}</span> wait.
      </p>
      {completeness ? (
        <p className="text-small text-mute">
          {interval
            ? `Of ${counted(completeness.lenses, 'known lens', 'known lenses')} among the calibration stamps it sent on ${many(completeness.sentOn)}: ${percent(completeness.sentOn, completeness.lenses)}, between ${Math.round(100 * interval.low)} and ${Math.round(100 * interval.high)} % (95 %, Wilson).`
            : 'What it misses is not known yet: no calibration stamp that is a lens has been passed over.'}
        </p>
      ) : null}
      <div className="flex flex-wrap gap-2">
        {passes && waiting > 0 ? (
          <ButtonLink href={`${campaignPath}/sheet`}>Go on with the first pass</ButtonLink>
        ) : null}
        {completeness && dropped > 0 ? (
          <ButtonLink href={`${campaignPath}/candidates?state=not+sent+on`}>What was not sent on</ButtonLink>
        ) : null}
      </div>
    </Part>
  )
}
