'use client'

import { Button } from '@/components/ui/button'
import { useKeptForm, type FormAction } from './use-kept-form'

export function RetryForm({ recipient, action }: { recipient: string; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="mt-1 flex flex-col items-start gap-1">
      <Button type="submit" disabled={pending} aria-label={`Try to send the message to ${recipient} again`}>
        Try again
      </Button>
      <span role="status" className="text-note">
        {state.message ?? state.done}
      </span>
    </form>
  )
}
