'use client'

import { useRouter } from 'next/navigation'
import { startTransition, useActionState, useEffect } from 'react'
import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'
import { TextArea } from '@/components/ui/field'
import { Notice } from '@/components/ui/notice'
import { ProgressBar } from '@/components/ui/progress-bar'
import type { ListedRelease } from '@/lib/work/releases/list-releases'

const EVERY_MS = 1500

/** How far the files of a release are; asked again until they are there, or making them was given up. */
export function MakingProgress({
  number,
  making,
  again,
  giveUp,
}: {
  number: number
  making: NonNullable<ListedRelease['making']>
  /** null for those who may not ask for it */
  again: FormAction | null
  giveUp: FormAction | null
}) {
  const router = useRouter()
  const { done, total, error, gaveUp } = making
  useEffect(() => {
    if (gaveUp) return
    const timer = setInterval(() => startTransition(() => router.refresh()), EVERY_MS)
    return () => clearInterval(timer)
  }, [gaveUp, router])
  if (gaveUp) {
    return (
      <Notice tone="alarm">
        <div className="flex flex-col items-start gap-3">
          <p>
            The files of release {number} could not be made{error ? `: ${error}` : '.'} What it says is frozen and kept;
            only its files are missing.
          </p>
          {again ? <MakeAgain action={again} /> : null}
          {giveUp ? <GiveUp number={number} action={giveUp} /> : null}
        </div>
      </Notice>
    )
  }
  return (
    <div className="flex max-w-xl flex-col gap-2">
      <p role="status" className="text-small text-mute">
        What it says is frozen. Its files are being made
        {total > 0 ? (
          <>
            : <span className="figures">{done.toLocaleString('en')}</span> of{' '}
            <span className="figures">{total.toLocaleString('en')}</span> entries and files
          </>
        ) : null}
        . You may close this page; the work goes on. Then you can open it to others.
        {error ? ` ${error}` : ''}
      </p>
      <ProgressBar label={`Entries and files of release ${number}`} done={done} total={total} />
    </div>
  )
}

function MakeAgain({ action }: { action: FormAction }) {
  const [state, submit, pending] = useActionState(action, {})
  return (
    <form action={submit} className="flex flex-col items-start gap-3">
      <FormNote state={state} />
      <Button type="submit" disabled={pending}>
        Make them again
      </Button>
    </form>
  )
}

function GiveUp({ number, action }: { number: number; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <details className="w-full text-small">
      <summary className="min-h-6">Give it up, if they cannot be made</summary>
      <form {...formProps} className="mt-2 flex max-w-xl flex-col gap-3">
        <p className="text-mute">
          Release {number} then stays in this list with your reason, is never opened, and the next release can be
          published.
        </p>
        <FormNote state={state} />
        <TextArea label="Why" name="reason" rows={2} required maxLength={2000} error={state.errors?.reason} />
        <Button type="submit" disabled={pending} className="self-start">
          Give up release {number}
        </Button>
      </form>
    </details>
  )
}
