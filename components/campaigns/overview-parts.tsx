import type { ReactNode } from 'react'
import { ButtonLink } from '@/components/ui/button'
import type { CampaignOverview } from '@/lib/work/campaigns/campaign-overview'
import { counted, percent } from './in-words'
import type { Step } from './next-steps'
import { ProgressBar } from '@/components/ui/progress-bar'

export function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-4 border-t border-line pt-5">
      <h2 className="text-title font-semibold text-balance">{title}</h2>
      {children}
    </section>
  )
}

/** How far the looking is: `65 % of the looks are given` where their number is fixed, candidates that want more where it is not. */
export function GradingProgress({ overview, usesSheet = false }: { overview: CampaignOverview; usesSheet?: boolean }) {
  const unread = overview.candidates - overview.imaged
  const withoutPictures = unread > 0 ? ` ${counted(unread, 'candidate')} without pictures yet.` : ''
  const { wanted, waiting } = overview.grading
  if (overview.rule.method === 'reliability' || wanted === null || waiting === null) {
    return <UntilDecided overview={overview} withoutPictures={withoutPictures} />
  }
  const { given } = overview.grading
  const { gradesWanted } = overview.rule
  return (
    <Part title={wanted ? `${percent(given, wanted)} of the looks are given` : 'No looks yet'}>
      <ProgressBar done={given} total={wanted} label="Looks given" />
      <p className="text-small text-mute">
        <Figure>{given}</Figure> of <Figure>{wanted}</Figure> wanted: {counted(gradesWanted, 'person', 'people')} for{' '}
        {overview.imaged === 1 ? 'the one imaged candidate' : `each of ${counted(overview.imaged, 'imaged candidate')}`}
        {wanted < gradesWanted * overview.imaged
          ? `, none at what a ruling has decided${usesSheet ? ' or the first pass has not sent on' : ''}`
          : ''}
        .{withoutPictures}
      </p>
    </Part>
  )
}

/** By the reliability method nobody knows how many looks there will be. Graders are told no more than how many there were. */
function UntilDecided({ overview, withoutPictures }: { overview: CampaignOverview; withoutPictures: string }) {
  const { given, wanted, waiting } = overview.grading
  const most = counted(overview.rule.gradesWanted, 'person', 'people')
  const rule = `A candidate is looked at until its grades decide it, by at most ${most}.${withoutPictures}`
  if (wanted === null || waiting === null) {
    return (
      <Part title={given ? `${counted(given, 'look')} given` : 'No looks yet'}>
        <p className="text-small text-mute">{rule}</p>
      </Part>
    )
  }
  const title = waiting
    ? `${counted(waiting, 'candidate')} ${waiting === 1 ? 'wants' : 'want'} more looks`
    : 'No candidate wants another look'
  return (
    <Part title={title}>
      <ProgressBar
        done={overview.imaged - waiting}
        total={overview.imaged}
        label="Candidates that want no more looks"
      />
      <p className="text-small text-mute">
        <Figure>{given}</Figure> {given === 1 ? 'look' : 'looks'} given
        {waiting ? (
          <>
            , at most <Figure>{wanted - given}</Figure> more to come
          </>
        ) : null}
        . {rule}
      </p>
    </Part>
  )
}

function Figure({ children }: { children: number }) {
  return <span className="figures text-text">{children.toLocaleString('en')}</span>
}

/** What to do, the first of it in the light of the lamp. */
export function NextSteps({ steps }: { steps: Step[] }) {
  return (
    <ol className="flex flex-col">
      {steps.map((step, index) => (
        <li
          key={step.text}
          className="flex flex-col items-start gap-2.5 border-b border-line py-4 first:pt-0 last:border-b-0"
        >
          <p className={index === 0 ? 'text-body' : 'text-body text-mute'}>{step.text}</p>
          <ButtonLink href={step.href} tone={index === 0 ? 'lamp' : 'plain'}>
            {step.action}
          </ButtonLink>
        </li>
      ))}
    </ol>
  )
}
