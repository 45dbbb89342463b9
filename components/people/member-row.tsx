'use client'

import { useState } from 'react'
import type { Role } from '@/db/schema/people'
import { Button } from '@/components/ui/button'
import { ConfirmButton } from './confirm-button'
import { ROLE_LABEL } from './role-choice'
import { useKeptForm, type FormAction } from './use-kept-form'

export interface MemberView {
  personId: number
  name: string
  email: string | null
  role: Role
  pseudonym: string
}

function RoleForm({ member, action }: { member: MemberView; action: FormAction }) {
  const [role, setRole] = useState<Role>(member.role)
  const { state, pending, formProps } = useKeptForm(action)
  return (
    <form {...formProps} className="flex flex-col gap-1">
      <span className="flex items-center gap-2">
        <select
          name="role"
          aria-label={`Role of ${member.name}`}
          value={role}
          onChange={(event) => setRole(event.target.value as Role)}
          className="min-h-8 rounded-control border border-edge bg-well px-2 text-small text-text"
        >
          {(Object.keys(ROLE_LABEL) as Role[]).map((one) => (
            <option key={one} value={one}>
              {ROLE_LABEL[one]}
            </option>
          ))}
        </select>
        {role === member.role ? null : (
          <Button
            type="submit"
            disabled={pending}
            aria-label={`Save the role of ${member.name}`}
            className="min-h-8 py-1"
          >
            Save
          </Button>
        )}
      </span>
      {state.message ? (
        <span role="alert" className="max-w-72 text-note text-alarm">
          {state.message}
        </span>
      ) : null}
    </form>
  )
}

/** One member: who, which role, and the way out. On a phone the cells stand below each other. */
export function MemberRow({
  member,
  self,
  changeRole,
  endMembership,
}: {
  member: MemberView
  self: boolean
  changeRole: FormAction
  endMembership: FormAction
}) {
  const who = self ? 'your' : `${member.name}’s`
  return (
    <tr className="flex flex-wrap items-center gap-x-4 gap-y-1 border-b border-line py-2.5 md:table-row">
      <td className="w-full md:w-auto md:py-2 md:pr-4">
        <span className="font-semibold">{member.name}</span>
        {self ? <span className="text-mute"> (you)</span> : null}
        <span className="block break-all text-note text-mute">{member.email}</span>
      </td>
      <td className="figures text-small text-mute md:pr-4">{member.pseudonym}</td>
      <td className="md:pr-4">
        {/* A role that was saved becomes the new starting point. */}
        <RoleForm key={member.role} member={member} action={changeRole} />
      </td>
      <td className="ml-auto md:text-right">
        <ConfirmButton
          label="End membership"
          name={`End membership of ${member.name}${self ? ' (you)' : ''}`}
          question={`End ${who} membership?`}
          consequence={`${self ? 'You' : member.name} will not see this campaign any more. Grades already given stay and count; whoever is invited back keeps the pseudonym ${member.pseudonym}.`}
          confirm="End the membership"
          action={endMembership}
        />
      </td>
    </tr>
  )
}
