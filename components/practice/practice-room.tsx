'use client'

import { ArrowLeft } from 'lucide-react'
import Link from 'next/link'
import { useCallback, useEffect, useState } from 'react'
import { GradeLadder } from '@/components/bench/grade-ladder'
import { gradeName } from '@/components/bench/grade-words'
import { keyOf } from '@/components/bench/key-choice'
import { ProgressHairline } from '@/components/bench/progress-hairline'
import { SlideStrip } from '@/components/bench/slide-strip'
import { Stage } from '@/components/bench/stage'
import { useBenchKeys } from '@/components/bench/use-bench-keys'
import { useKeys } from '@/components/bench/use-keys'
import { runLight } from '@/components/light/light-keys'
import { LightSection } from '@/components/light/light-section'
import { useLight } from '@/components/light/use-light'
import { ButtonLink } from '@/components/ui/button'
import { KeyNames } from '@/components/ui/key-names'
import type { PracticeState } from '@/lib/work/calibration/practice'
import { PracticeEnd } from './practice-end'
import { TruthPanel, TruthStage } from './truth-panel'
import { usePractice } from './use-practice'

export interface PracticeProps {
  slug: string
  campaignName: string
  personId: number
  lead: boolean
  first: PracticeState
}

const nothing = () => {}

/** The bench with stamps whose truth is known: the same keys, and after each answer what it was. */
export function PracticeRoom({ slug, campaignName, personId, lead, first }: PracticeProps) {
  const practice = usePractice(slug, personId, first)
  const { state, truth } = practice
  const stamp = state.next
  const keys = useKeys(personId)
  const light = useLight(personId, slug)
  const [bare, setBare] = useState(false)
  useEffect(() => light.show(stamp?.id ?? null), [light, stamp?.id])
  const step = (by: 1 | -1) => {
    const shown = stamp?.views.filter(({ url }) => url !== null) ?? []
    if (shown.length === 0) return
    const at = shown.findIndex(({ key }) => key === practice.shownView)
    practice.chooseView(shown[(at + by + shown.length) % shown.length].key)
  }
  useBenchKeys({
    on: keys.on,
    choice: keys.choice,
    chooser: null,
    onCommand: (command) => {
      if (command.do === 'grade') practice.answer(command.letter)
      else if (command.do === 'view' && stamp?.views[command.index]) practice.chooseView(stamp.views[command.index].key)
      else if (command.do === 'next view') step(command.step)
      else if (command.do === 'blink') setBare(true)
      else if (command.do === 'light' && !truth) runLight(light, command.light)
    },
    onBlinkEnd: () => setBare(false),
  })
  const keyName = useCallback((key: string) => (keys.on ? keyOf(keys.choice, key) : null), [keys])
  const wanted = Math.max(state.wanted, state.answered)
  const answered = state.answered + (truth ? 1 : 0)

  return (
    <KeyNames.Provider value={keyName}>
      <div className="night fixed inset-0 flex flex-col overflow-hidden overscroll-none bg-bench text-text [color-scheme:dark]">
        <main className="flex min-h-0 flex-1 flex-col md:grid md:grid-cols-[minmax(0,1fr)_18.5rem] md:grid-rows-[auto_minmax(0,1fr)] short:grid short:grid-cols-[minmax(0,1fr)_14.5rem] short:grid-rows-[auto_minmax(0,1fr)]">
          <div className="md:col-span-2 short:col-span-2">
            {wanted > 0 ? <ProgressHairline given={answered} left={Math.max(0, state.wanted - answered)} /> : null}
            <p aria-live="polite" className="sr-only">
              {truth ? `${truth.truth === 'lens' ? 'A lens.' : 'Not a lens.'} ${truth.explanation}` : ''}
            </p>
          </div>
          <div className="flex min-h-0 min-w-0 flex-1 flex-col">
            <header className="flex items-center justify-between gap-x-6 px-3 pt-2 md:px-6 md:pt-3">
              <div className="flex min-w-0 items-center gap-3">
                <Link
                  prefetch={false}
                  href={`/campaigns/${slug}`}
                  aria-label={`Leave practice, to ${campaignName}`}
                  title="Leave practice"
                  className="-ml-2 grid size-11 shrink-0 place-items-center rounded-control text-mute hover:text-text md:size-8"
                >
                  <ArrowLeft size={18} aria-hidden="true" />
                </Link>
                <span className="text-small font-semibold">Practice</span>
                <span className="whitespace-nowrap text-note text-mute">
                  <span className="figures">{answered}</span>
                  {state.wanted > answered ? (
                    <>
                      {' '}
                      of <span className="figures">{state.wanted}</span> asked for
                    </>
                  ) : (
                    ` answered${state.wanted > 0 ? `, ${state.wanted} asked for` : ''}`
                  )}
                </span>
              </div>
              {stamp ? (
                <h1 className="figures truncate text-small font-semibold">{truth?.name ?? stamp.name}</h1>
              ) : null}
            </header>
            {stamp ? (
              <div className="flex min-h-0 flex-1 flex-col short:flex-row-reverse">
                {truth ? (
                  <TruthStage stamp={stamp} shown={practice.shownView} truth={truth} bare={bare} />
                ) : (
                  <Stage
                    key={stamp.id}
                    candidate={stamp}
                    shown={practice.shownView}
                    light={light}
                    tool={null}
                    onLeaveTool={nothing}
                    onSeen={practice.markSeen}
                    onBlink={setBare}
                    onSweep={step}
                  />
                )}
                <SlideStrip views={stamp.views} shown={practice.shownView} onChoose={practice.chooseView} />
              </div>
            ) : (
              <PracticeEnd slug={slug} state={state} lead={lead} />
            )}
          </div>
          <aside
            aria-label="Your answer"
            className="flex flex-col gap-3 px-3 pb-[max(0.5rem,env(safe-area-inset-bottom))] md:overflow-y-auto md:border-l md:border-line md:px-5 md:pb-4 md:pt-4 short:overflow-y-auto"
          >
            {stamp && truth ? (
              <TruthPanel
                truth={truth}
                gradeName={gradeName(truth.grade)}
                own={state.own}
                busy={practice.busy}
                onGoOn={practice.goOn}
              />
            ) : null}
            {stamp && !truth ? (
              <>
                <GradeLadder chosen={null} onGrade={practice.answer} />
                <LightSection light={light} keys={keys.on} className="whitespace-nowrap max-md:hidden" />
                <p className="text-note text-mute max-md:hidden">
                  Practice is yours alone: answers count nowhere and nobody else sees them.
                </p>
              </>
            ) : null}
            {state.wanted > 0 && answered >= state.wanted && stamp ? (
              <p className="flex flex-wrap items-center gap-x-3 text-small">
                That was what this campaign asks for. More is up to you.
                <ButtonLink href={`/campaigns/${slug}/bench`} prefetch={false}>
                  To the bench
                </ButtonLink>
              </p>
            ) : null}
            {practice.trouble ? (
              <p role="alert" className="text-small text-alarm">
                {practice.trouble}
              </p>
            ) : null}
          </aside>
        </main>
      </div>
    </KeyNames.Provider>
  )
}
