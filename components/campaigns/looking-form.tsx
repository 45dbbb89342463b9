'use client'

import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextField } from '@/components/ui/field'

export interface Looking {
  queueOrder: string
  /** Shares from 0 to 1. */
  calibrationShare: number
  repeatShare: number
  practiceWanted: number
}

const ORDERS = [
  {
    value: 'most needed',
    label: 'Most needed first',
    about: 'Those nearest to their wanted number, so that candidates get finished.',
  },
  { value: 'score', label: 'Highest score first', about: 'What the machine search thought most of.' },
  { value: 'shuffled', label: 'Shuffled for each grader', about: 'Nobody’s tiredness falls on the same candidates.' },
] as const

const inPercent = (share: number) => String(Math.round(1000 * share) / 10)

export function LookingForm({ looking, action }: { looking: Looking; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex flex-col gap-5" aria-label="How people look">
      <fieldset className="flex flex-col gap-2">
        <legend className="mb-1 text-small font-semibold">Order of the queue</legend>
        {ORDERS.map(({ value, label, about }) => (
          <label key={value} className="flex items-start gap-2.5 text-body">
            <input
              type="radio"
              name="queueOrder"
              value={value}
              defaultChecked={value === looking.queueOrder}
              className="mt-1 size-4 shrink-0 accent-(--lamp)"
            />
            <span>
              {label}
              <span className="block text-note text-mute">{about}</span>
            </span>
          </label>
        ))}
        <p className="text-note text-mute">Of the mean method. By reliability, the looks that tell most come first.</p>
      </fieldset>
      <div className="grid gap-5 sm:grid-cols-2">
        <TextField
          label="Calibration stamps, % of looks"
          name="calibrationPercent"
          inputMode="decimal"
          defaultValue={inPercent(looking.calibrationShare)}
          hint="0 to 50. They come to everybody once, until there are no more."
          error={state.errors?.calibrationPercent}
        />
        <TextField
          label="Own earlier candidates, % of looks"
          name="repeatPercent"
          inputMode="decimal"
          defaultValue={inPercent(looking.repeatShare)}
          hint="0 to 20. They come back turned or mirrored, to measure self-consistency, and count in no verdict."
          error={state.errors?.repeatPercent}
        />
        <TextField
          label="Practice asked of newcomers, stamps"
          name="practiceWanted"
          inputMode="numeric"
          defaultValue={String(looking.practiceWanted)}
          hint="0 asks for none. A stamp that somebody has practised on never measures them."
          error={state.errors?.practiceWanted}
        />
      </div>
      <FormNote state={state} />
      <Button type="submit" disabled={pending} className="self-start">
        {pending ? 'Saving…' : 'Save how people look'}
      </Button>
    </form>
  )
}
