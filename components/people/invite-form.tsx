'use client'

import { Button } from '@/components/ui/button'
import { TextArea } from '@/components/ui/field'
import { FormNote } from './form-note'
import { RoleChoice } from './role-choice'
import { useKeptForm, type FormAction } from './use-kept-form'

export function InviteForm({ action, mailLeavesSite }: { action: FormAction; mailLeavesSite: boolean }) {
  const { state, pending, formProps } = useKeptForm(action, { emptyWhenDone: true })
  return (
    <form {...formProps} className="flex flex-col gap-4" aria-label="Invite people">
      <TextArea
        label="E-mail addresses"
        name="emails"
        rows={3}
        placeholder="dunlin@saltmarsh.test, plover@saltmarsh.test"
        hint="One or several, apart by commas, blanks or lines."
        autoComplete="off"
        autoCapitalize="none"
        spellCheck={false}
        error={state.errors?.emails}
      />
      <RoleChoice error={state.errors?.role} />
      {mailLeavesSite ? null : (
        <p className="text-note text-mute">
          This site sends no mail. Invitations wait in the outbox, where an administrator reads the link and passes it
          on.
        </p>
      )}
      <FormNote state={state} />
      <Button tone="lamp" type="submit" disabled={pending} className="self-start px-6">
        {pending ? 'Inviting…' : 'Invite'}
      </Button>
    </form>
  )
}
