import { useEffect, useRef, useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { Button } from '@/components/ui/button'
import { StampFigure } from '@/components/ui/stamp-figure'
import type { Confusion } from '@/lib/work/calibration/confusion'
import type { PracticeStamp, PracticeTruth } from '@/lib/work/calibration/practice'
import { TruthMarks } from './truth-marks'

/** The picture with what was painted marked on it; holding it, or the blink key, takes the marks off. */
export function TruthStage({
  stamp,
  shown,
  truth,
  bare,
}: {
  stamp: PracticeStamp
  shown: string | null
  truth: PracticeTruth
  bare: boolean
}) {
  const [held, setHeld] = useState(false)
  const view = stamp.views.find(({ key }) => key === shown) ?? stamp.views[0]
  const side = Math.max(view?.width ?? 0, view?.height ?? 0)
  return (
    <figure className="flex min-h-0 min-w-0 flex-1 flex-col">
      <div className="grid min-h-0 flex-1 place-items-center px-2 [container-type:size] md:px-6 short:px-1">
        <div
          className="relative aspect-square w-[min(100cqw,100cqh)] select-none bg-black [-webkit-touch-callout:none]"
          onPointerDown={() => setHeld(true)}
          onPointerUp={() => setHeld(false)}
          onPointerLeave={() => setHeld(false)}
          onPointerCancel={() => setHeld(false)}
          onContextMenu={(event) => event.preventDefault()}
        >
          <StampFigure
            src={view?.url ?? null}
            alt={`${truth.name}, ${view?.label ?? ''}`}
            width={view?.width ?? 0}
            height={view?.height ?? 0}
            geometry={view?.geometry ?? stamp.geometry}
          />
          {truth.marks && !bare && !held && view?.url ? (
            <TruthMarks marks={truth.marks} side={side} geometry={view.geometry} />
          ) : null}
        </div>
      </div>
      <figcaption className="flex h-9 shrink-0 items-center justify-center px-3 text-center text-note leading-4 text-tray-text">
        {truth.marks
          ? 'The dashed lines go round the painted light. Hold the picture, or Space, to see it without them.'
          : ''}
      </figcaption>
    </figure>
  )
}

/** Whether the answer and the truth go together; 'cannot judge' is neither right nor wrong. */
function verdictOf({ truth, grade }: PracticeTruth): string {
  if (grade === 'U') return 'You could not judge it.'
  const is = truth === 'lens' ? 'It is a lens' : 'It is not a lens'
  return (grade === 'N') === (truth === 'not a lens') ? `${is}, as you said.` : `${is}, against your answer.`
}

export function TruthPanel({
  truth,
  gradeName,
  own,
  busy,
  onGoOn,
}: {
  truth: PracticeTruth
  gradeName: string
  own: Confusion
  busy: boolean
  onGoOn: () => void
}) {
  const next = useRef<HTMLButtonElement>(null)
  // Enter goes on, and a screen reader is taken to what there is to know.
  useEffect(() => next.current?.focus({ preventScroll: true }), [])
  const { lensesSeen, othersSeen } = own
  const soFar = [
    ...(lensesSeen.of > 0 ? [`${lensesSeen.n} of ${counted(lensesSeen.of, 'lens', 'lenses')} seen`] : []),
    ...(othersSeen.of > 0 ? [`${othersSeen.n} of ${counted(othersSeen.of, 'non-lens', 'non-lenses')} graded N`] : []),
  ]
  return (
    <section aria-labelledby="practice-truth" className="flex flex-col gap-2 md:gap-3">
      <h2 id="practice-truth" className="text-title font-semibold">
        {truth.truth === 'lens' ? 'A lens' : 'Not a lens'}
      </h2>
      <p className="text-small">{truth.explanation}</p>
      <p className="text-small text-mute">
        You said {truth.grade}, {gradeName.toLowerCase()}. {verdictOf(truth)}
      </p>
      <Button ref={next} tone="lamp" onClick={onGoOn} disabled={busy} className="max-md:min-h-12">
        Next stamp
      </Button>
      <p className="text-note text-mute max-md:hidden">
        Enter goes on.
        {soFar.length > 0 ? ` Before this one: ${soFar.join(', ')}.` : ''}
      </p>
    </section>
  )
}
