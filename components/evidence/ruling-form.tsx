'use client'

import { useId, useState, type KeyboardEvent, type RefObject } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { KeyCap } from '@/components/ui/key-cap'
import type { EvidenceRuling } from '@/lib/work/rulings/candidate-evidence'
import { describeOutcome } from '@/lib/work/rulings/describe-ruling'
import type { RulingChoice } from '@/lib/work/rulings/ruling-input'
import { CHOICES, CONSEQUENCE, UNDECIDED } from './ruling-choices'

/**
 * A ruling: what, and why. The choice can be held by the screen around it, which lets keys choose. Ctrl and Enter rule from
 * within the reason. A standing ruling is told, so that ruling again is known to reverse it.
 */
export function RulingForm({
  action,
  standing,
  lastRulingId,
  choice: held,
  onChoose,
  reasonRef,
  keys = false,
  many,
  hidden = {},
}: {
  action: FormAction
  standing: EvidenceRuling | null
  lastRulingId: number | null
  choice?: RulingChoice | null
  onChoose?: (choice: RulingChoice) => void
  reasonRef?: RefObject<HTMLTextAreaElement | null>
  keys?: boolean
  /** How many candidates it rules on, where not on the one that is shown. */
  many?: number
  /** Further values for the action, such as which case comes next. */
  hidden?: Record<string, string>
}) {
  const [own, setOwn] = useState<RulingChoice | null>(null)
  const rule: FormAction = async (before, form) => {
    const after = await action(before, form)
    if (after.done) setOwn(null)
    return after
  }
  const { state, pending, formProps } = useKeptForm(rule, { emptyWhenDone: true })
  const choice = held === undefined ? own : held
  const id = useId()
  const choose = (next: RulingChoice) => {
    setOwn(next)
    onChoose?.(next)
  }
  const ruleFromReason = (event: KeyboardEvent<HTMLTextAreaElement>) => {
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) {
      event.preventDefault()
      event.currentTarget.form?.requestSubmit()
    }
    if (event.key === 'Escape') event.currentTarget.blur()
  }
  const chosen = CHOICES.find((one) => one.choice === choice)
  const offered = CHOICES.filter((one) => one.choice !== 'by-verdict' || standing)
  const { choice: choiceFault, reason: reasonFault } = state.errors ?? {}
  return (
    <form
      {...formProps}
      className="flex flex-col gap-2.5"
      aria-label={many === undefined ? 'Rule on this candidate' : 'Rule on the selected'}
    >
      {standing ? (
        <p className="text-small">
          <span className="font-semibold">Reverse this ruling:</span> {standing.by} has ruled{' '}
          <span className="font-semibold">{describeOutcome(standing)}</span>. A new ruling stands in its place; both
          stay on record.
        </p>
      ) : null}
      <input type="hidden" name="lastRuling" value={lastRulingId ?? ''} />
      {Object.entries(hidden).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <fieldset aria-describedby={choiceFault ? `${id}-choice` : undefined} className="flex flex-wrap gap-1.5">
        <legend className="sr-only">What do you rule?</legend>
        {offered.map((one) => (
          <label
            key={one.choice}
            className="inline-flex min-h-9 items-center gap-2 rounded-control border border-edge/50 bg-raise px-3 text-small font-semibold hover:border-edge has-checked:border-lamp has-checked:text-lamp has-focus-visible:outline-2 has-focus-visible:outline-offset-2 has-focus-visible:outline-text"
          >
            <input
              type="radio"
              name="choice"
              value={one.choice}
              checked={choice === one.choice}
              onChange={() => choose(one.choice)}
              aria-label={one.action}
              className="sr-only"
            />
            {one.label}
            {keys ? (
              <span aria-hidden="true" className="hidden lg:inline">
                <KeyCap>{one.key}</KeyCap>
              </span>
            ) : null}
          </label>
        ))}
      </fieldset>
      {choiceFault ? (
        <p id={`${id}-choice`} className="text-note text-alarm">
          {choiceFault}
        </p>
      ) : null}
      <div className="flex flex-wrap items-end gap-2.5">
        <div className="flex min-w-52 flex-1 flex-col gap-1">
          <label htmlFor={id} className="sr-only">
            Reason, kept with the ruling
          </label>
          <textarea
            id={id}
            ref={reasonRef}
            name="reason"
            rows={1}
            placeholder="Reason, kept with the ruling"
            onKeyDown={ruleFromReason}
            aria-invalid={reasonFault ? true : undefined}
            aria-describedby={reasonFault ? `${id}-reason` : undefined}
            className="field-sizing-content max-h-40 min-h-9 w-full resize-none rounded-control border border-edge bg-well px-3 py-1.5 text-body text-text placeholder:text-mute aria-invalid:border-alarm"
          />
        </div>
        <Button tone="lamp" type="submit" disabled={pending} className="min-w-36">
          {pending ? 'Ruling…' : (chosen?.action ?? 'Rule')}
          {many !== undefined && !pending ? ` (${many})` : ''}
        </Button>
      </div>
      {reasonFault ? (
        <p id={`${id}-reason`} className="text-note text-alarm">
          {reasonFault}
        </p>
      ) : null}
      <p className="text-note text-mute">{choice ? CONSEQUENCE[choice] : UNDECIDED}</p>
      {state.errors && Object.keys(state.errors).length > 0 ? null : <FormNote state={state} />}
    </form>
  )
}
