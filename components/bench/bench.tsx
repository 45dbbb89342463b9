'use client'

import { runLight } from '@/components/light/light-keys'
import { LightSection } from '@/components/light/light-section'
import { useLight, useLightFact } from '@/components/light/use-light'
import { KeyCap } from '@/components/ui/key-cap'
import type { LentQueue } from '@/lib/work/queue/lend-next'
import { AskedLine } from './asked-line'
import { BenchHeader } from './bench-header'
import { BenchRest } from './bench-rest'
import { GradeLadder } from './grade-ladder'
import { gradeName } from './grade-words'
import { HelpOverlay } from './help-overlay'
import { LastLine } from './last-line'
import { letGo } from './let-go'
import { ProgressHairline } from './progress-hairline'
import { RefusedGrades } from './refused-grades'
import { RemarkBox } from './remark-box'
import { SaveLine } from './save-line'
import { SlideStrip } from './slide-strip'
import { Stage } from './stage'
import { TagChooser } from './tag-chooser'
import { useBench } from './use-bench'
import { useBenchKeys } from './use-bench-keys'
import { useKeySwitch } from './use-key-switch'
import { useLightSupply } from './use-light-supply'

export interface BenchProps {
  slug: string
  campaignName: string
  personId: number
  lead: boolean
  first: LentQueue
}

/** The whole window, always night: one candidate large, its views below, the ladder at the right (below, on a phone). */
export function Bench({ slug, campaignName, personId, lead, first }: BenchProps) {
  const bench = useBench(slug, personId, first)
  const [keysOn, setKeysOn] = useKeySwitch(personId)
  const { session, look, run } = bench
  const light = useLight(personId, slug)
  // On a phone the picture would shrink too much beside both.
  const lightOpen = useLightFact(light, (now) => now.open)
  useLightSupply(light, look?.candidate.id ?? null, session.upcoming)
  useBenchKeys({
    on: keysOn,
    chooser: bench.chooser,
    onCommand: (command) => {
      if (command.do !== 'light') run(command)
      else if (look && !bench.helpOpen) runLight(light, command.light)
    },
    onBlinkEnd: () => bench.setBlinking(false),
  })
  const last = session.given.find(({ candidate }) => candidate.id === session.last?.candidateId)
  const asked = look?.candidate.asked
  const moreAsked = session.upcoming.filter(({ id, asked }) => asked && id !== look?.candidate.id).length
  const spoken = [
    last && session.lookingBack === null
      ? `${last.answer.grade}, ${gradeName(last.answer.grade)}: ${last.candidate.name}.`
      : '',
    look ? `${session.lookingBack === null ? 'Now' : 'Back at'} ${look.candidate.name}.` : '',
    asked ? `${asked.by} asks for your look.` : '',
  ].join(' ')

  return (
    <div className="night fixed inset-0 flex flex-col overflow-hidden bg-bench text-text [color-scheme:dark]">
      <main className="flex min-h-0 flex-1 flex-col md:grid md:grid-cols-[minmax(0,1fr)_18.5rem] md:grid-rows-[auto_minmax(0,1fr)]">
        <div className="md:col-span-2">
          <ProgressHairline {...session.counts} />
          <p aria-live="polite" className="sr-only">
            {spoken}
          </p>
        </div>
        <div className="flex min-h-0 min-w-0 flex-1 flex-col">
          <BenchHeader
            slug={slug}
            campaignName={campaignName}
            counts={session.counts}
            candidate={look?.candidate ?? null}
          />
          <LastLine
            session={session}
            hint={bench.hint}
            explaining={bench.chooser === 'reasons'}
            onUndo={() => run({ do: 'undo' })}
            onKeep={() => run({ do: 'keep' })}
            onExplain={() => run({ do: 'reasons' })}
            onReason={bench.explain}
          />
          {look ? (
            <>
              {asked ? <AskedLine asked={asked} more={moreAsked} /> : null}
              <Stage
                key={look.candidate.id}
                candidate={look.candidate}
                shown={bench.shownView}
                light={light}
                onSeen={bench.markSeen}
                onBlink={bench.setBlinking}
                onSweep={(step) => run({ do: 'next view', step })}
              />
              <SlideStrip views={look.candidate.views} shown={bench.shownView} onChoose={bench.chooseView} />
            </>
          ) : (
            <BenchRest slug={slug} session={session} lead={lead} onLookBack={() => run({ do: 'undo' })} />
          )}
        </div>
        <aside
          aria-label="Your grade"
          className={`flex flex-col gap-1 px-3 pb-[max(0.5rem,env(safe-area-inset-bottom))] md:gap-3 md:overflow-y-auto md:px-5 md:pb-4 md:pt-4 ${look ? 'md:border-l md:border-line' : ''}`}
        >
          {look ? (
            <>
              <div className="order-last md:order-none">
                <GradeLadder chosen={look.answer?.grade ?? null} onGrade={(letter) => run({ do: 'grade', letter })} />
              </div>
              <div className={lightOpen ? 'max-md:hidden' : 'contents'}>
                <TagChooser
                  tags={bench.draft.tags}
                  open={bench.chooser === 'tags'}
                  onOpen={() => run({ do: 'tags' })}
                  onToggle={bench.toggleTag}
                />
              </div>
              <LightSection light={light} keys={keysOn} />
            </>
          ) : null}
          <RefusedGrades refused={bench.snapshot.refused} onDismiss={bench.dismiss} />
          <div className="flex flex-wrap items-center justify-between gap-x-3 md:contents">
            {look ? (
              <RemarkBox
                remark={bench.draft.remark}
                open={bench.remarkOpen}
                onOpen={() => run({ do: 'remark' })}
                onClose={bench.closeRemark}
                onWrite={bench.writeRemark}
              />
            ) : null}
            <div className="flex grow items-center justify-end gap-x-3 md:mt-auto md:grow-0 md:flex-col md:items-start md:gap-2">
              <SaveLine snapshot={bench.snapshot} slug={slug} />
              <button
                type="button"
                onClick={letGo(() => bench.setHelpOpen(true))}
                className="order-last flex min-h-11 items-center gap-2 text-note text-mute hover:text-text md:order-first md:min-h-7"
              >
                {keysOn ? (
                  <span className="hidden md:inline">
                    <KeyCap>?</KeyCap>
                  </span>
                ) : null}
                {keysOn ? 'All keys' : 'Keys are off'}
              </button>
            </div>
          </div>
        </aside>
      </main>
      <HelpOverlay open={bench.helpOpen} onOpenChange={bench.setHelpOpen} keysOn={keysOn} onKeysOn={setKeysOn} />
    </div>
  )
}
