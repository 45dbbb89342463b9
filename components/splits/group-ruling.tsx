'use client'

import type { RefObject } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { RulingForm } from '@/components/evidence/ruling-form'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm } from '@/components/people/use-kept-form'
import { TextButton } from '@/components/ui/text-button'
import type { FormState } from '@/components/ui/form-state'
import { describeOutcome } from '@/lib/work/rulings/describe-ruling'
import { writeCases, type GroupRuling } from '@/lib/work/rulings/group-input'
import type { SplitCase } from '@/lib/work/rulings/list-splits'
import type { GroupOutcome } from '@/lib/work/rulings/rule-on-several'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'

/** What the action for several answers beside the state of the form. */
export interface GroupState extends FormState {
  group?: GroupOutcome & Pick<GroupRuling, 'outcome' | 'grade'>
}
export type GroupAction = (state: FormState, form: FormData) => Promise<GroupState>

/** The selected splits side by side, and one ruling with one reason for all of them. */
export function GroupRulingPanel({
  cases,
  choice,
  onChoose,
  reasonRef,
  keys,
  action,
  onGo,
  onClear,
}: {
  cases: SplitCase[]
  choice: RulingChoice | null
  onChoose: (choice: RulingChoice) => void
  reasonRef: RefObject<HTMLTextAreaElement | null>
  keys: boolean
  action: (state: FormState, form: FormData) => Promise<FormState>
  onGo: (id: number) => void
  onClear: () => void
}) {
  return (
    <section aria-label="Ruling on several" className="flex flex-col gap-2.5">
      <div className="flex flex-wrap items-center justify-between gap-x-3">
        <h3 className="text-small font-semibold">
          {cases.length === 1 ? 'One split is selected' : `One ruling for the ${cases.length} selected`}
        </h3>
        <TextButton onClick={onClear}>Select none</TextButton>
      </div>
      <ol aria-label="Selected" className="flex max-h-44 flex-wrap gap-1.5 overflow-y-auto p-0.5">
        {cases.map((one) => (
          <li key={one.id}>
            <button
              type="button"
              onClick={() => onGo(one.id)}
              title={`Look at ${one.name}`}
              className="block w-18 rounded-key bg-tray p-0.5 text-left"
            >
              <span className="block aspect-square w-full bg-black">
                {one.picture?.url ? (
                  <img src={one.picture.url} alt="" loading="lazy" className="pixelated size-full object-contain" />
                ) : null}
              </span>
              <span className="figures block truncate text-[0.6875rem] leading-4 text-tray-text">{one.name}</span>
            </button>
          </li>
        ))}
      </ol>
      <RulingForm
        action={action}
        standing={null}
        lastRulingId={null}
        choice={choice}
        onChoose={onChoose}
        reasonRef={reasonRef}
        keys={keys}
        many={cases.length}
        hidden={{
          cases: writeCases(cases.map((one) => ({ candidateId: one.id, lastRulingSeen: one.lastRulingId }))),
        }}
      />
    </section>
  )
}

/** What came of a ruling on several: how many, which not and why, and the way back. */
export function GroupResult({
  group,
  undo,
  onDismiss,
}: {
  group: NonNullable<GroupState['group']>
  undo: (state: FormState, form: FormData) => Promise<FormState>
  onDismiss: () => void
}) {
  const { state, pending, formProps } = useKeptForm(undo)
  const { ruled, refused } = group
  const undone = group.outcome === 'by verdict'
  const withdrawn = ruled.reduce((sum, { asksWithdrawn }) => sum + asksWithdrawn, 0)
  return (
    <div role="status" className="flex flex-col gap-1.5 border-b border-line bg-raise px-5 py-2.5 text-small">
      <div className="flex flex-wrap items-center gap-x-3 gap-y-1">
        <span>
          {ruled.length > 0 ? (
            <>
              {counted(ruled.length, 'candidate')} {ruled.length === 1 ? 'is' : 'are'}{' '}
              {undone ? 'by verdict again' : describeOutcome(group)}.
            </>
          ) : (
            'None was ruled on.'
          )}
          {withdrawn > 0
            ? ` ${counted(withdrawn, 'asked look was', 'asked looks were')} withdrawn, and taking it back asks for none again.`
            : ''}
          {refused.length > 0 ? ` ${counted(refused.length, 'was', 'were')} refused:` : ''}
        </span>
        {ruled.length > 0 && !undone ? (
          <form {...formProps}>
            <input
              type="hidden"
              name="cases"
              value={writeCases(ruled.map(({ candidateId, rulingId }) => ({ candidateId, lastRulingSeen: rulingId })))}
            />
            <TextButton type="submit" disabled={pending}>
              Take {ruled.length === 1 ? 'it' : 'them all'} back
            </TextButton>
          </form>
        ) : null}
        <TextButton onClick={onDismiss} className="ml-auto">
          Close
        </TextButton>
      </div>
      {refused.length > 0 ? (
        <ul className="flex max-h-28 flex-col gap-0.5 overflow-y-auto text-note text-mute">
          {refused.map(({ candidateId, name, reason }) => (
            <li key={candidateId}>
              <span className="figures text-text">{name}</span>: {reason}
            </li>
          ))}
        </ul>
      ) : null}
      <FormNote state={state.message ? state : {}} />
    </div>
  )
}
