import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import type { FormAction } from '@/components/people/use-kept-form'
import { StatePill } from '@/components/ui/state-pill'
import type { LeaveOutPreview } from '@/lib/work/consensus/preview-leave-out'
import { LeftOutNote } from './grader-panel'
import { LeaveOutForm } from './leave-out-form'

/** What would change, before a lead leaves a grader out or counts them again. */
export function LeaveOutView({
  preview,
  back,
  longestReason,
  action,
}: {
  preview: LeaveOutPreview
  back: string
  longestReason: number
  action: FormAction
}) {
  const { name, looks, leftOut, moves, keptByRuling } = preview
  const changing = moves.reduce((sum, { candidates }) => sum + candidates, 0)
  return (
    <div className="mx-auto flex max-w-3xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={leftOut ? `Count ${name}’s grades again?` : `Leave ${name} out of the consensus?`}
        lead={
          leftOut
            ? `${counted(looks, 'look')} by ${name} would count again.`
            : `${counted(looks, 'look')} by ${name} would no longer count. They stay, ${name} can go on grading, and you can take it back at any time.`
        }
      />
      {leftOut ? (
        <LeftOutNote leftOut={{ since: leftOut.since, by: leftOut.decidedBy, reason: leftOut.reason }} />
      ) : null}
      <section className="flex flex-col gap-3 border-t border-line pt-5">
        <h2 className="text-title font-semibold">
          {changing === 0
            ? 'No candidate would change its state'
            : `${counted(changing, 'candidate')} would change ${changing === 1 ? 'its' : 'their'} state`}
        </h2>
        {moves.length > 0 ? (
          <ul className="flex flex-col gap-2">
            {moves.map(({ from, to, candidates }) => (
              <li key={`${from} ${to}`} className="flex flex-wrap items-center gap-2">
                <span className="figures min-w-12 text-right">{candidates.toLocaleString('en')}</span>
                <StatePill state={from} />
                <span aria-hidden="true">→</span>
                <span className="sr-only">to</span>
                <StatePill state={to} />
              </li>
            ))}
          </ul>
        ) : null}
        <p className="text-small text-mute">
          The next consensus run with {name}’s looks beside the same run without them, by the rule in force and every
          grade up to now.
          {keptByRuling > 0
            ? ` ${counted(keptByRuling, 'verdict')} more would be another, under rulings that keep their candidates as they are.`
            : ''}
        </p>
      </section>
      <LeaveOutForm
        action={action}
        confirm={leftOut ? `Count ${name}’s grades again` : `Leave ${name} out`}
        back={back}
        longest={longestReason}
      />
    </div>
  )
}
