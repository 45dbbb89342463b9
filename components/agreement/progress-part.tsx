import { counted, day } from '@/components/campaigns/in-words'
import { ProgressBar } from '@/components/ui/progress-bar'
import type { FinishEstimate } from '@/lib/work/reports/finish-estimate'
import { paceInWords } from './words'

/** How far the looks are, and when they may all be given. */
export function ProgressPart({ progress }: { progress: FinishEstimate }) {
  const { given, remaining, pace, finish, reason, lastDays } = progress
  const total = given + Math.round(remaining.expected)
  return (
    <div className="flex max-w-3xl flex-col gap-3">
      <ProgressBar done={given} total={total} label="Looks given of those that are expected" />
      <p>
        {counted(given, 'look')} given, {Math.round(remaining.expected).toLocaleString('en')} to come
        {remaining.least < remaining.most
          ? ` (at least ${remaining.least.toLocaleString('en')}, at most ${remaining.most.toLocaleString('en')})`
          : ''}
        .
      </p>
      {pace && finish ? (
        <p className="text-small text-mute">
          From the last 7 days:{' '}
          {counted(
            lastDays.reduce((sum, looks) => sum + looks, 0),
            'look',
          )}
          , so {paceInWords(pace.value)} a day, quiet days counted. Going on like that,{' '}
          {day(finish.early) === day(finish.late ?? '')
            ? `the last look is given on ${day(finish.early)}.`
            : `the last look is given between ${day(finish.early)} and ${
                finish.late ? day(finish.late) : 'an open end, because some weeks like this have no pace at all'
              }.`}{' '}
          The range is the 95 % interval of that mean ({paceInWords(pace.low)} to {paceInWords(pace.high)} a day), days
          drawn again with replacement.
        </p>
      ) : (
        <p className="text-small text-mute">{reason}</p>
      )}
    </div>
  )
}

export function progressTitle({ finish, remaining }: FinishEstimate): string {
  if (remaining.most === 0) return 'Every look is given'
  return finish ? `Done about ${day(finish.likely)}` : 'No date to be done by'
}
