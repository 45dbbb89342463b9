import type { ReactNode } from 'react'
import { ButtonLink } from '@/components/ui/button'
import { EmptyState, Notice, VisualGradeCaution } from '@/components/ui/notice'
import type { CampaignOverview } from '@/lib/work/campaigns/campaign-overview'
import { Agreement } from './agreement'
import { counted } from './in-words'
import { asksInWords, leadSteps } from './next-steps'
import { NewestTray, type TrayStamp } from './newest-tray'
import { GradingProgress, NextSteps, Part } from './overview-parts'
import { PageHead } from './page-head'
import { StateBar } from './state-bar'

interface Props {
  overview: CampaignOverview
  about: string
  campaignPath: string
  stamps: TrayStamp[]
  /** what the Agreement page has to say; comes later than the rest */
  agreementLine?: ReactNode
  /** how far the first pass is, where there is one */
  firstPass?: ReactNode
}

function headline({ outcome, candidates }: CampaignOverview): string {
  if (candidates === 0) return 'No candidates yet'
  if (!outcome) return counted(candidates, 'candidate')
  const { confirmed, split } = outcome.counts
  const rest = split ? `, ${counted(split, 'split')}` : ''
  return `${counted(candidates, 'candidate')}: ${confirmed.toLocaleString('en')} confirmed${rest}`
}

function Outcome({ overview, campaignPath, stamps, agreementLine, firstPass }: Props) {
  const { outcome } = overview
  if (!outcome) return null
  const { split, open } = outcome.counts
  const undecided = split + open
  return (
    <>
      <Part title={undecided ? `${counted(undecided, 'candidate')} undecided` : 'Every candidate is decided'}>
        <StateBar counts={outcome.counts} campaignPath={campaignPath} />
      </Part>
      {firstPass}
      <GradingProgress overview={overview} usesSheet={Boolean(firstPass)} />
      <Part title="How far the graders agree">
        {outcome.run ? (
          <Agreement run={outcome.run} />
        ) : (
          <p className="text-small text-mute">
            No consensus run yet. One starts by itself as soon as a candidate has{' '}
            {counted(overview.rule.leastGrades, 'grade')}.
          </p>
        )}
        {outcome.run ? agreementLine : null}
      </Part>
      {stamps.length ? (
        <Part title="Confirmed last">
          <NewestTray stamps={stamps} campaignPath={campaignPath} />
          <VisualGradeCaution />
        </Part>
      ) : null}
    </>
  )
}

export function LeadOverview(props: Props) {
  const { overview, about, campaignPath } = props
  const steps = leadSteps(overview, campaignPath)
  const jobs = overview.upkeep?.jobs ?? 0
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-6 px-5 py-8 md:px-10">
      <PageHead title={headline(overview)} lead={about} />
      {jobs > 0 ? (
        <Notice>{counted(jobs, 'job')} at work in the background: reading, imaging or a consensus run.</Notice>
      ) : null}
      <div className="flex flex-col gap-8 lg:grid lg:grid-cols-[minmax(0,1fr)_18rem] lg:gap-12">
        <section className="flex flex-col gap-4 border-t border-line pt-5 lg:order-2 lg:border-l lg:border-t-0 lg:pl-8 lg:pt-0">
          <h2 className="text-title font-semibold">{steps.length ? 'Next' : 'Nothing waits for you'}</h2>
          {steps.length ? (
            <NextSteps steps={steps} />
          ) : (
            <p className="text-mute">
              Everything that a lead can do now is done. New grades start a consensus run by themselves.
            </p>
          )}
        </section>
        <div className="flex min-w-0 flex-col gap-8">
          {overview.candidates === 0 ? (
            <EmptyState title="This campaign waits for its first files">
              <p>
                Upload one FITS file per candidate and band, or files that hold all bands. Ringside reads position and
                scale from the header, makes the stamps and lends them out to your graders.
              </p>
            </EmptyState>
          ) : (
            <Outcome {...props} />
          )}
        </div>
      </div>
    </div>
  )
}

function ToTheBench({ campaignPath }: Pick<Props, 'campaignPath'>) {
  return (
    <ButtonLink href={`${campaignPath}/bench`} tone="lamp" className="min-h-12 px-8 text-body">
      Sit down at the bench
    </ButtonLink>
  )
}

export function GraderOverview({ overview, about, campaignPath }: Props) {
  const left = overview.mine?.left ?? 0
  const lookedAt = overview.mine?.lookedAt ?? 0
  const asked = overview.mine?.asked ?? 0
  return (
    <div className="mx-auto flex max-w-3xl flex-col gap-10 px-5 py-8 md:px-10">
      <p className="text-mute">{about}</p>
      {left > 0 ? (
        <div className="flex flex-col items-start gap-5">
          <h1 className="flex flex-col">
            <span className="figures text-[5.5rem] font-semibold leading-none">{left.toLocaleString('en')}</span>{' '}
            <span className="text-title font-semibold">
              {left === 1 ? 'candidate is' : 'candidates are'} left for you
            </span>
          </h1>
          {asked > 0 ? (
            <p>
              {asksInWords(asked)}; {asked === 1 ? 'it comes' : 'they come'} first.
            </p>
          ) : null}
          <ToTheBench campaignPath={campaignPath} />
          <p className="max-w-md text-mute">
            One look at a time: letter keys grade, <span className="text-text">?</span> shows all keys. Leave whenever
            you like; every grade is kept as you give it.
          </p>
        </div>
      ) : asked > 0 ? (
        <div className="flex flex-col items-start gap-5">
          <h1 className="text-display font-semibold">{asksInWords(asked)}</h1>
          <p className="max-w-md text-mute">
            Somebody wants to know what you see there, though you have seen every candidate that still wanted a look.
          </p>
          <ToTheBench campaignPath={campaignPath} />
        </div>
      ) : (
        <div className="flex flex-col items-start gap-3">
          <h1 className="text-display font-semibold">
            {overview.imaged === 0 ? 'No candidates yet' : 'Nothing is left for you'}
          </h1>
          <p className="max-w-md text-mute">
            {overview.imaged === 0
              ? 'A lead has yet to upload the cutouts. Come back when you hear from them.'
              : 'You have seen every candidate that still wanted a look. New ones appear here when a lead uploads more.'}
          </p>
        </div>
      )}
      {overview.imaged ? <GradingProgress overview={overview} /> : null}
      {lookedAt > 0 ? (
        <Part title={`You have looked at ${counted(lookedAt, 'candidate')}`}>
          <p className="text-mute">
            What the others think of a candidate opens to you once you have graded it yourself.
          </p>
          <ButtonLink href={`${campaignPath}/candidates`} className="self-start">
            See the candidates
          </ButtonLink>
        </Part>
      ) : null}
    </div>
  )
}

export function ViewerOverview(props: Props) {
  const { overview, about, campaignPath } = props
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead title={headline(overview)} lead={about}>
        <ButtonLink href={`${campaignPath}/catalogue`} tone="lamp" className="px-6">
          Open the catalogue
        </ButtonLink>
      </PageHead>
      {overview.candidates === 0 ? (
        <EmptyState title="Nothing to read yet">
          <p>Candidates appear here when a lead has uploaded their cutouts.</p>
        </EmptyState>
      ) : (
        <Outcome {...props} />
      )}
    </div>
  )
}
