import { Fragment } from 'react'
import { KeyCap } from '@/components/ui/key-cap'
import { CANNOT_JUDGE_REASONS, type CannotJudgeReason } from '@/lib/work/grading/tags'
import { currentLook, explainable, type BenchSession } from './bench-session'
import { isLook } from './look-id'
import { ChoiceChips } from './choice-chips'
import { gradeName } from './grade-words'
import { OFFERS, type BreakOffer } from './kindness'
import { letGo } from './let-go'

const INK = { A: 'text-letter-a', B: 'text-letter-b', C: 'text-letter-c', N: 'text-letter-n', U: 'text-text' }

function LineButton({ label, keyName, onPress }: { label: string; keyName: string; onPress: () => void }) {
  return (
    <button
      type="button"
      onClick={letGo(onPress)}
      className="flex min-h-11 min-w-11 items-center justify-center gap-1.5 whitespace-nowrap rounded-control px-1.5 text-note text-mute underline decoration-line underline-offset-4 hover:text-text md:min-h-7 md:no-underline"
    >
      <span className="hidden md:inline">
        <KeyCap>{keyName}</KeyCap>
      </span>
      {label}
    </button>
  )
}

/** One line of fixed height above the stamp: what was just given, or that one looks back. Nothing moves when it changes. */
export function LastLine({
  session,
  hint,
  offer,
  explaining,
  onRest,
  onDecline,
  onUndo,
  onKeep,
  onExplain,
  onReason,
}: {
  session: BenchSession
  /** Said instead, such as why a key did nothing. */
  hint: string | null
  /** A break is offered in place of what was given; grading goes on all the same. */
  offer: BreakOffer | null
  explaining: boolean
  onRest: () => void
  onDecline: () => void
  onUndo: () => void
  onKeep: () => void
  onExplain: () => void
  onReason: (reason: CannotJudgeReason) => void
}) {
  const look = currentLook(session)
  const { last: done } = session
  const last = done ? session.given.find((one) => isLook(one, done)) : undefined
  const unclear = explainable(session)
  // Each case has its own key, so that a button of one is not moved to where the next has its.
  return (
    <div className="flex min-h-11 items-center gap-x-2 [justify-content:safe_center] overflow-x-auto px-3 text-note text-mute md:min-h-9 short:min-h-11 short:min-w-0 short:flex-1">
      {hint ? (
        <span className="text-text">{hint}</span>
      ) : offer && session.lookingBack === null && !explaining ? (
        <Fragment key="offer">
          <span role="status" className="text-text">
            {OFFERS[offer]}
          </span>
          <LineButton label="end the sitting" keyName="E" onPress={onRest} />
          <LineButton label="not now" keyName="Esc" onPress={onDecline} />
          <LineButton label="undo" keyName="Z" onPress={onUndo} />
        </Fragment>
      ) : session.lookingBack !== null && look?.answer ? (
        <Fragment key="back">
          <span>
            Looking back: you gave{' '}
            <b className={INK[look.answer.grade]}>
              {look.answer.grade} {gradeName(look.answer.grade).toLowerCase()}
            </b>
            . Grade again to correct it.
          </span>
          <LineButton label="keep it" keyName="K" onPress={onKeep} />
          {session.lookingBack > 0 ? <LineButton label="further" keyName="Z" onPress={onUndo} /> : null}
        </Fragment>
      ) : last ? (
        <Fragment key="last">
          <b className={`text-body ${INK[last.answer.grade]} ${explaining ? 'hidden md:inline' : ''}`}>
            {last.answer.grade}
          </b>
          <span className={`whitespace-nowrap ${explaining ? 'hidden md:inline' : ''}`}>
            {WHAT[session.last?.what ?? 'given']}{' '}
            {/* Wide enough for most names: one that comes in place of a number moves nothing. */}
            <span className="figures inline-block min-w-[12ch] text-left">{last.called ?? last.candidate.name}</span>
            {last.answer.reason ? `, ${last.answer.reason}` : ''}
          </span>
          <LineButton label="undo" keyName="Z" onPress={onUndo} />
          {unclear && !explaining && !unclear.answer.reason ? (
            <LineButton label="say why" keyName="W" onPress={onExplain} />
          ) : null}
          {unclear && explaining ? (
            <ChoiceChips choices={CANNOT_JUDGE_REASONS} picked={[]} open onPick={onReason} />
          ) : null}
        </Fragment>
      ) : null}
    </div>
  )
}

const WHAT = { given: 'given to', corrected: 'corrected for', kept: 'kept for' } as const
