'use client'

import Link from 'next/link'
import type { ReactNode, RefObject } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { GradeList, gradesInWords } from '@/components/evidence/grade-list'
import { Position } from '@/components/evidence/position'
import { arithmeticInWords, thresholdsInWords } from '@/components/evidence/verdict-arithmetic'
import { RulingForm } from '@/components/evidence/ruling-form'
import { RulingList } from '@/components/evidence/ruling-record'
import { ViewsTray } from '@/components/evidence/views-tray'
import { WhyReliability } from '@/components/evidence/why-reliability'
import { Discussion } from '@/components/discussion/discussion'
import { AskedLooks, type Talk } from '@/components/discussion/talk'
import type { LightStore } from '@/components/light/light-store'
import type { FormAction } from '@/components/people/use-kept-form'
import { Notice } from '@/components/ui/notice'
import { StatePill } from '@/components/ui/state-pill'
import type { CandidateEvidence, Judgement } from '@/lib/work/rulings/candidate-evidence'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'

export interface CaseControls {
  view: number
  onView: (index: number) => void
  choice: RulingChoice | null
  onChoose: (choice: RulingChoice) => void
  reasonRef: RefObject<HTMLTextAreaElement | null>
  keys: boolean
  light: LightStore
  blinking: boolean
}

/** One case: everything needed to rule on it in one place, and the ruling at the bottom. */
export function SplitCase({
  slug,
  evidence,
  judgement,
  decides,
  nextId,
  action,
  controls,
  group,
  talk,
  known,
}: {
  slug: string
  evidence: CandidateEvidence
  judgement: Judgement
  /** What would decide it, in sentences. */
  decides: string[]
  nextId: number | null
  action: FormAction
  controls: CaseControls
  /** In place of the ruling on this case, while several are selected. */
  group: ReactNode
  talk: Talk | null
  /** That reference lists know it, in a word. */
  known?: ReactNode
}) {
  const { verdict, standingRuling, rulings, grades } = judgement
  return (
    <article id="case" aria-label={evidence.name} className="flex min-w-0 flex-col lg:h-full lg:min-h-0">
      <div className="flex flex-col gap-4 px-5 py-5 lg:min-h-0 lg:flex-1 lg:overflow-y-auto">
        <header className="flex flex-wrap items-start justify-between gap-x-4 gap-y-1">
          <div className="flex min-w-0 flex-col gap-0.5">
            <h2 className="figures text-title font-semibold [overflow-wrap:anywhere]">{evidence.name}</h2>
            <Position raDeg={evidence.raDeg} decDeg={evidence.decDeg} />
            {known}
          </div>
          <div className="flex items-center gap-3 pt-1">
            <Link
              href={`/campaigns/${slug}/candidates/${evidence.id}`}
              className="text-note text-mute underline decoration-edge underline-offset-4 hover:text-text"
            >
              All its evidence
            </Link>
            <StatePill state={judgement.state} />
          </div>
        </header>
        <div className="grid items-start gap-x-6 gap-y-5 xl:grid-cols-[minmax(0,1fr)_18rem]">
          <div className="flex min-w-0 flex-col gap-4">
            <div className="lg:max-w-[min(100%,calc(100dvh-25.5rem))] lg:min-w-[min(100%,18rem)] xl:min-w-[min(100%,24rem)]">
              <ViewsTray
                name={evidence.name}
                pictures={evidence.pictures}
                chosen={controls.view}
                onChoose={controls.onView}
                keys={controls.keys}
                viewKeys
                light={controls.light}
                blinking={controls.blinking}
              />
            </div>
            {judgement.why && verdict ? (
              <section aria-label="The verdict as a sum">
                <WhyReliability why={judgement.why} verdict={verdict} />
              </section>
            ) : null}
          </div>
          <div className="flex min-w-0 flex-col gap-5">
            <div className="flex max-w-prose flex-col gap-1.5 text-small text-mute">
              <p>
                <span className="font-semibold text-text">
                  {judgement.state === 'split' ? 'Why it is split.' : `Why it is ${judgement.state}.`}
                </span>{' '}
                {withoutState(judgement.stateReason)}
              </p>
              {judgement.state === 'split' && decides.length > 0 ? (
                <p>
                  <span className="font-semibold text-text">What would decide it.</span> {decides.join(' ')}
                </p>
              ) : null}
              {verdict && !judgement.why ? (
                <p className="text-note">
                  {arithmeticInWords(verdict, grades)} {thresholdsInWords(verdict)}
                </p>
              ) : null}
            </div>
            <section aria-label="Grades" className="flex flex-col gap-2">
              <h3 className="text-small font-semibold text-mute">{gradesInWords(grades)}</h3>
              <GradeList grades={grades} />
              {talk ? <AskedLooks talk={talk} /> : null}
            </section>
            {talk ? (
              <section aria-label="Discussion" className="flex flex-col gap-2">
                <h3 className="text-small font-semibold text-mute">Discussion</h3>
                <Discussion thread={talk.thread} action={talk.post} draftKey={talk.draftKey} />
              </section>
            ) : null}
            {rulings.length > 0 ? (
              <section aria-label="Rulings" className="flex flex-col gap-2">
                <h3 className="text-small font-semibold text-mute">{counted(rulings.length, 'ruling')}</h3>
                <RulingList rulings={rulings} standing={standingRuling} />
              </section>
            ) : null}
          </div>
        </div>
      </div>
      <footer className="border-t border-line bg-raise px-5 py-3">
        {group ? (
          group
        ) : judgement.calibration ? (
          <Notice>This is a calibration stamp: its truth is known, so it is never ruled on.</Notice>
        ) : (
          <RulingForm
            action={action}
            standing={standingRuling}
            lastRulingId={rulings[0]?.id ?? null}
            choice={controls.choice}
            onChoose={controls.onChoose}
            reasonRef={controls.reasonRef}
            keys={controls.keys}
            hidden={nextId === null ? {} : { next: String(nextId) }}
          />
        )}
      </footer>
    </article>
  )
}

/** 'Split: grades A, N' reads on from 'Why it is split.' as 'Grades A, N'. */
function withoutState(reason: string): string {
  const rest = reason.replace(/^(Split|Open|Confirmed|Set aside): /, '')
  return rest.charAt(0).toUpperCase() + rest.slice(1)
}
