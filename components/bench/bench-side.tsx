import { LightSection } from '@/components/light/light-section'
import type { LightStore } from '@/components/light/light-store'
import { useLightFact } from '@/components/light/use-light'
import { KeyCap } from '@/components/ui/key-cap'
import { GradeLadder } from './grade-ladder'
import { letGo } from './let-go'
import { MeasureButtons } from './measure-buttons'
import { RemarkBox } from './remark-box'
import { SaveLine } from './save-line'
import { TagChooser } from './tag-chooser'
import type { useBench } from './use-bench'

/** The ladder and what goes with a grade: at the right, below on a phone, at the thumb of a phone held sideways. */
export function BenchSide({
  bench,
  light,
  keysOn,
  slug,
}: {
  bench: ReturnType<typeof useBench>
  light: LightStore
  keysOn: boolean
  slug: string
}) {
  const { look, run } = bench
  // On a phone the picture would shrink too much beside both.
  const lightOpen = useLightFact(light, (now) => now.open)
  return (
    <aside
      aria-label="Your grade"
      className={`flex flex-col gap-1 px-3 pb-[max(0.5rem,env(safe-area-inset-bottom))] md:gap-3 md:overflow-y-auto md:px-5 md:pb-4 md:pt-4 short:gap-1 short:overflow-y-auto short:px-3 short:pb-1 short:pr-[max(0.75rem,env(safe-area-inset-right))] short:pt-1 ${look ? 'md:border-l md:border-line' : ''}`}
    >
      {look ? (
        <>
          <div className="order-last md:order-none short:order-none">
            <GradeLadder chosen={look.answer?.grade ?? null} onGrade={(letter) => run({ do: 'grade', letter })} />
          </div>
          <div className={lightOpen ? 'max-md:hidden short:hidden' : 'contents'}>
            <TagChooser
              tags={bench.draft.tags}
              open={bench.chooser === 'tags'}
              onOpen={() => run({ do: 'tags' })}
              onToggle={bench.toggleTag}
            />
          </div>
          <div className="flex flex-wrap justify-between gap-x-4 md:contents short:flex">
            <LightSection
              light={light}
              keys={keysOn}
              className={`whitespace-nowrap short:gap-x-2 ${lightOpen ? 'max-md:basis-full short:basis-full' : 'max-md:grow'}`}
            />
            <div className={lightOpen ? 'max-md:hidden short:hidden' : 'contents'}>
              <MeasureButtons tool={bench.tool} onTool={(tool) => run({ do: 'measure', tool })} />
            </div>
          </div>
        </>
      ) : null}
      {/* One row whatever is said in it, so that the picture keeps its size. */}
      <div
        className={`flex items-center justify-between gap-x-3 md:contents short:flex short:flex-wrap ${bench.remarkOpen ? 'min-h-11 md:flex-wrap' : ''}`}
      >
        {look ? (
          <RemarkBox
            remark={bench.draft.remark}
            open={bench.remarkOpen}
            onOpen={() => run({ do: 'remark' })}
            onClose={bench.closeRemark}
            onWrite={bench.writeRemark}
          />
        ) : null}
        <div className="flex min-w-0 grow items-center justify-end gap-x-3 md:sticky md:-bottom-4 md:mt-auto md:grow-0 md:flex-col md:items-start md:gap-2 md:bg-bench md:pt-1 short:static short:mt-0 short:grow short:flex-row short:items-start short:justify-between">
          <SaveLine snapshot={bench.snapshot} slug={slug} onRefused={() => bench.setSheet('refused')} />
          <div className="order-last flex gap-x-4 whitespace-nowrap md:order-first short:order-last">
            <button
              type="button"
              onClick={letGo(() => bench.setSheet('help'))}
              className="flex min-h-11 items-center gap-2 text-note text-mute hover:text-text md:min-h-7 short:min-h-11"
            >
              <span className="hidden md:inline">
                <KeyCap>?</KeyCap>
              </span>
              {keysOn ? 'All keys' : 'Keys are off'}
            </button>
            {look ? (
              <button
                type="button"
                onClick={letGo(() => run({ do: 'rest' }))}
                className="flex min-h-11 items-center gap-2 text-note text-mute hover:text-text md:min-h-7 short:min-h-11"
              >
                <span className="hidden md:inline">
                  <KeyCap>E</KeyCap>
                </span>
                Finish
              </button>
            ) : null}
          </div>
        </div>
      </div>
    </aside>
  )
}
