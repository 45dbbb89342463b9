'use client'

import { FormNote } from '@/components/people/form-note'
import { useKeptForm, type FormAction } from '@/components/people/use-kept-form'
import { Button } from '@/components/ui/button'

export interface SheetChoice {
  usesSheet: boolean
  graders: { personId: number; name: string; passes: boolean }[]
}

/** Whether there is a first pass, and who makes it besides the leads. */
export function SheetForm({ choice, action }: { choice: SheetChoice; action: FormAction }) {
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex flex-col gap-5" aria-label="First pass">
      <label className="flex items-start gap-2.5">
        <input
          type="checkbox"
          name="usesSheet"
          defaultChecked={choice.usesSheet}
          className="mt-1 size-4 shrink-0 accent-lamp"
        />
        <span>
          A first pass over the sheet
          <span className="block text-note text-mute">
            Only what it sends on comes to the bench; the rest is set aside, and can be sent on later. What has been
            graded stays at the bench. Turned off, everything is served again.
          </span>
        </span>
      </label>
      <fieldset className="flex flex-col gap-2">
        <legend className="mb-1 text-small font-semibold">Who makes it, besides the leads</legend>
        {choice.graders.length === 0 ? <p className="text-note text-mute">There are no graders yet.</p> : null}
        <div className="grid gap-2 sm:grid-cols-2">
          {choice.graders.map(({ personId, name, passes }) => (
            <label key={personId} className="flex min-h-6 items-center gap-2.5">
              <input
                type="checkbox"
                name="passers"
                value={personId}
                defaultChecked={passes}
                className="size-4 shrink-0 accent-lamp"
              />
              {name}
            </label>
          ))}
        </div>
      </fieldset>
      <FormNote state={state} />
      <Button type="submit" disabled={pending} className="self-start">
        {pending ? 'Saving…' : 'Save the first pass'}
      </Button>
    </form>
  )
}
