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

/** `212 of 360 looks given`, and the bar of it. */
export function GradingProgress({ overview }: { overview: CampaignOverview }) {
  const { given, wanted } = overview.grading
  const { gradesWanted } = overview.rule
  const unread = overview.candidates - overview.imaged
  return (
    <Part title={wanted ? `${percent(given, wanted)} of the looks are given` : 'No looks yet'}>
      <ProgressBar done={given} total={wanted} label="Looks given" />
      <p className="text-small text-mute">
        <span className="figures text-text">{given.toLocaleString('en')}</span> of{' '}
        <span className="figures text-text">{wanted.toLocaleString('en')}</span> wanted:{' '}
        {counted(gradesWanted, 'person', 'people')} for each of {counted(overview.imaged, 'imaged candidate')}
        {wanted < gradesWanted * overview.imaged ? ', none at what a ruling has decided' : ''}
        {unread > 0 ? `; ${counted(unread, 'candidate')} without pictures yet` : ''}.
      </p>
    </Part>
  )
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
