'use client'

import { AlertDialog } from 'radix-ui'
import { useEffect, useState } from 'react'
import { Button } from '@/components/ui/button'
import { FormNote } from './form-note'
import { useKeptForm, type FormAction } from './use-kept-form'

/** A button whose deed is asked about once more, in a dialog that says what it does and what stays. */
export function ConfirmButton({
  label,
  name,
  question,
  consequence,
  confirm,
  action,
}: {
  label: string
  /** For those who hear the page: which of the many buttons of this label it is. */
  name: string
  question: string
  consequence: string
  confirm: string
  action: FormAction
}) {
  const [open, setOpen] = useState(false)
  return (
    <AlertDialog.Root open={open} onOpenChange={setOpen}>
      <AlertDialog.Trigger asChild>
        <Button tone="bare" aria-label={name}>
          {label}
        </Button>
      </AlertDialog.Trigger>
      <AlertDialog.Portal>
        <AlertDialog.Overlay className="fixed inset-0 z-40 bg-black/60" />
        <AlertDialog.Content className="fixed left-1/2 top-1/2 z-50 flex w-[min(28rem,calc(100vw-2rem))] -translate-x-1/2 -translate-y-1/2 flex-col gap-3 rounded-control border border-edge/60 bg-page p-6">
          <AlertDialog.Title className="text-title font-semibold">{question}</AlertDialog.Title>
          <AlertDialog.Description className="text-mute">{consequence}</AlertDialog.Description>
          <Deed action={action} confirm={confirm} onDone={() => setOpen(false)} />
        </AlertDialog.Content>
      </AlertDialog.Portal>
    </AlertDialog.Root>
  )
}

function Deed({ action, confirm, onDone }: { action: FormAction; confirm: string; onDone: () => void }) {
  const { state, pending, formProps } = useKeptForm(action)
  useEffect(() => {
    if (state.done) onDone()
  }, [state, onDone])
  return (
    <form {...formProps} className="flex flex-col gap-4">
      <FormNote state={state.done ? {} : state} />
      <div className="flex flex-wrap gap-3">
        <AlertDialog.Cancel asChild>
          <Button>Leave it as it is</Button>
        </AlertDialog.Cancel>
        <Button tone="lamp" type="submit" disabled={pending}>
          {confirm}
        </Button>
      </div>
    </form>
  )
}
