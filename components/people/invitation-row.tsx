'use client'

import { Button } from '@/components/ui/button'
import { day } from '@/components/campaigns/in-words'
import type { InvitationRow as Row } from '@/lib/work/people/list-people'
import { ConfirmButton } from './confirm-button'
import { useKeptForm, type FormAction } from './use-kept-form'

/** An invitation that nobody has answered yet. */
export function InvitationRow({
  invitation,
  sendAgain,
  withdraw,
}: {
  invitation: Row
  sendAgain: FormAction
  withdraw: FormAction
}) {
  const { state, pending, formProps } = useKeptForm(sendAgain)
  const { email, role, createdAt, expiresAt, expired } = invitation
  return (
    <li className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-line py-2.5">
      <div className="min-w-0 flex-1 basis-64">
        <span className="break-all font-semibold">{email}</span>
        <span className="text-mute"> as {role}</span>
        <span className={`block text-note ${expired ? 'text-alarm' : 'text-mute'}`}>
          {expired
            ? `Expired on ${day(expiresAt)}: send it again`
            : `Sent ${day(createdAt)}, holds until ${day(expiresAt)}`}
        </span>
        {state.message ? (
          <span role="alert" className="text-note text-alarm">
            {state.message}
          </span>
        ) : null}
      </div>
      <form {...formProps}>
        <Button type="submit" disabled={pending} aria-label={`Send the invitation to ${email} again`}>
          Send again
        </Button>
      </form>
      <ConfirmButton
        label="Withdraw"
        name={`Withdraw the invitation to ${email}`}
        question={`Withdraw the invitation to ${email}?`}
        consequence="The link in the mail stops working. You can invite the address again."
        confirm="Withdraw the invitation"
        action={withdraw}
      />
    </li>
  )
}
