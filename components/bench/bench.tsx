'use client'

import { useCallback } from 'react'
import { runLight } from '@/components/light/light-keys'
import { useLight } from '@/components/light/use-light'
import { KeyNames } from '@/components/ui/key-names'
import type { LentQueue } from '@/lib/work/queue/lend-next'
import { AskedLine } from './asked-line'
import { isLook } from './look-id'
import { BenchHeader } from './bench-header'
import { BenchRest } from './bench-rest'
import { BenchSheets } from './bench-sheets'
import { BenchSide } from './bench-side'
import { gradeName } from './grade-words'
import { keyOf } from './key-choice'
import { LastLine } from './last-line'
import { ProgressHairline } from './progress-hairline'
import { SlideStrip } from './slide-strip'
import { Stage } from './stage'
import { useBench } from './use-bench'
import { useBenchKeys } from './use-bench-keys'
import { useKeys } from './use-keys'
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
  const keys = useKeys(personId)
  const { session, look, run } = bench
  const light = useLight(personId, slug)
  useLightSupply(light, look?.candidate.id ?? null, session.upcoming)
  useBenchKeys({
    on: keys.on,
    choice: keys.choice,
    chooser: bench.chooser,
    onCommand: (command) => {
      if (command.do !== 'light') run(command)
      else if (look && !bench.sheet) runLight(light, command.light)
    },
    onBlinkEnd: () => bench.setBlinking(false),
  })
  const keyName = useCallback((key: string) => (keys.on ? keyOf(keys.choice, key) : null), [keys])
  const { last: done } = session
  const last = done ? session.given.find((one) => isLook(one, done)) : undefined
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
    <KeyNames.Provider value={keyName}>
      <div className="night fixed inset-0 flex flex-col overflow-hidden overscroll-none bg-bench text-text [color-scheme:dark]">
        <main className="flex min-h-0 flex-1 flex-col md:grid md:grid-cols-[minmax(0,1fr)_18.5rem] md:grid-rows-[auto_minmax(0,1fr)] short:grid short:grid-cols-[minmax(0,1fr)_15.5rem] short:grid-rows-[auto_minmax(0,1fr)]">
          <div className="md:col-span-2 short:col-span-2">
            <ProgressHairline {...session.counts} />
            <p aria-live="polite" className="sr-only">
              {spoken}
            </p>
          </div>
          <div className="flex min-h-0 min-w-0 flex-1 flex-col short:pl-[env(safe-area-inset-left)]">
            <div className="short:flex short:items-center short:justify-between">
              <BenchHeader
                slug={slug}
                campaignName={campaignName}
                counts={session.counts}
                candidate={look?.candidate ?? null}
                called={look?.called}
              />
              <LastLine
                session={session}
                hint={bench.hint}
                offer={bench.offer}
                explaining={bench.chooser === 'reasons'}
                onRest={() => run({ do: 'rest' })}
                onDecline={bench.declineBreak}
                onUndo={() => run({ do: 'undo' })}
                onKeep={() => run({ do: 'keep' })}
                onExplain={() => run({ do: 'reasons' })}
                onReason={bench.explain}
              />
            </div>
            {look ? (
              <>
                {asked ? <AskedLine asked={asked} more={moreAsked} /> : null}
                <div className="flex min-h-0 flex-1 flex-col short:flex-row-reverse">
                  <Stage
                    key={`${look.candidate.id} ${look.candidate.turned ?? 0}`}
                    candidate={look.candidate}
                    shown={bench.shownView}
                    light={light}
                    tool={bench.tool}
                    onLeaveTool={bench.leaveTool}
                    onSeen={bench.markSeen}
                    onBlink={bench.setBlinking}
                    onSweep={(step) => run({ do: 'next view', step })}
                  />
                  <SlideStrip
                    views={look.candidate.views}
                    shown={bench.shownView}
                    turned={look.candidate.turned}
                    onChoose={bench.chooseView}
                  />
                </div>
              </>
            ) : (
              <BenchRest
                slug={slug}
                session={session}
                lead={lead}
                resting={bench.resting}
                waiting={bench.snapshot.waiting.length}
                onGoOn={() => run({ do: 'rest' })}
                onLookBack={() => run({ do: 'undo' })}
              />
            )}
          </div>
          <BenchSide bench={bench} light={light} keysOn={keys.on} slug={slug} />
        </main>
        <BenchSheets bench={bench} keys={keys} />
      </div>
    </KeyNames.Provider>
  )
}
