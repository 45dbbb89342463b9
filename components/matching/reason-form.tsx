'use client'

import { useId, type KeyboardEvent, type RefObject } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'

/** A decision with its reason, without which nothing is decided. Ctrl and Enter decide from within the reason. */
export function ReasonForm({
  label,
  action,
  hidden,
  confirm,
  tone = 'plain',
  disabled = false,
  reasonRef,
}: {
  /** What the form is for, to those who hear the page. */
  label: string
  action: FormAction
  hidden: Record<string, string>
  confirm: string
  tone?: 'lamp' | 'plain'
  disabled?: boolean
  reasonRef?: RefObject<HTMLTextAreaElement | null>
}) {
  const { state, pending, formProps } = useKeptForm(action, { emptyWhenDone: true })
  const id = useId()
  const fault = state.errors?.reason
  const others = Object.entries(state.errors ?? {}).filter(([name]) => name !== 'reason')
  const decide = (event: KeyboardEvent<HTMLTextAreaElement>) => {
    if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) {
      event.preventDefault()
      if (!disabled) event.currentTarget.form?.requestSubmit()
    }
    if (event.key === 'Escape') event.currentTarget.blur()
  }
  return (
    <form {...formProps} aria-label={label} className="flex flex-col gap-2">
      {Object.entries(hidden).map(([name, value]) => (
        <input key={name} type="hidden" name={name} value={value} />
      ))}
      <div className="flex flex-wrap items-start gap-2.5">
        <div className="min-w-44 flex-1">
          <label htmlFor={id} className="sr-only">
            Reason, kept with the decision
          </label>
          <textarea
            id={id}
            ref={reasonRef}
            name="reason"
            rows={1}
            maxLength={1000}
            placeholder="Reason, kept with the decision"
            onKeyDown={decide}
            aria-invalid={fault ? true : undefined}
            aria-describedby={fault ? `${id}-fault` : undefined}
            className="field-sizing-content max-h-40 min-h-9 w-full resize-none rounded-control border border-edge bg-well px-3 py-1.5 text-body text-text placeholder:text-mute aria-invalid:border-alarm"
          />
        </div>
        <Button tone={tone} type="submit" disabled={pending || disabled}>
          {confirm}
        </Button>
      </div>
      {fault ? (
        <p id={`${id}-fault`} className="text-note text-alarm">
          {fault}
        </p>
      ) : null}
      {others.map(([name, sentence]) => (
        <p key={name} className="text-note text-alarm">
          {sentence}
        </p>
      ))}
      {state.errors && Object.keys(state.errors).length > 0 ? null : <FormNote state={state} />}
    </form>
  )
}
