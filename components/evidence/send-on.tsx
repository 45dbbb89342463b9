'use client'

import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'

/** For leads, where the first pass did not send a candidate on. */
export function SendOn({ action }: { action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} aria-label="First pass" className="flex flex-col items-start gap-3">
      <p className="text-small text-mute">
        The first pass did not send it on, so nobody sees it at the bench. Your mark sends it on, whoever dropped it.
      </p>
      <FormNote state={state} />
      <Button type="submit" disabled={pending}>
        {pending ? 'Sending on…' : 'Send on to the bench'}
      </Button>
    </form>
  )
}
