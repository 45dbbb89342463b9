'use client'

import Link from 'next/link'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextArea } from '@/components/ui/field'

/** Asks for the reason, without which nothing is decided. */
export function LeaveOutForm({
  action,
  confirm,
  back,
  longest,
}: {
  action: FormAction
  confirm: string
  back: string
  longest: number
}) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex max-w-xl flex-col gap-4">
      <FormNote state={state} />
      <TextArea
        label="Reason"
        name="reason"
        rows={3}
        maxLength={longest}
        defaultValue={state.values?.reason}
        error={state.errors?.reason}
        hint="Stays with the decision. Leads read it; viewers see only that it was made."
      />
      <div className="flex flex-wrap gap-3">
        <Button tone="lamp" type="submit" disabled={pending}>
          {confirm}
        </Button>
        <Link
          href={back}
          className="inline-flex min-h-9 items-center rounded-control px-3.5 text-small text-mute underline underline-offset-4 hover:text-text"
        >
          Leave it as it is
        </Link>
      </div>
    </form>
  )
}
