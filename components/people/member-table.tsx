import { MemberRow, type MemberView } from './member-row'
import type { FormAction } from './use-kept-form'

export function MemberTable({
  members,
  ownId,
  changeRole,
  endMembership,
}: {
  members: MemberView[]
  ownId: number
  changeRole: (personId: number) => FormAction
  endMembership: (personId: number) => FormAction
}) {
  return (
    <table className="w-full text-left">
      <caption className="sr-only">Members of the campaign</caption>
      <thead className="sr-only md:not-sr-only">
        <tr className="border-b border-line text-note text-mute">
          <th className="py-2 font-normal">Name and address</th>
          <th className="py-2 font-normal">Pseudonym</th>
          <th className="py-2 font-normal">Role</th>
          <th className="py-2 text-right font-normal">Membership</th>
        </tr>
      </thead>
      <tbody>
        {members.map((member) => (
          <MemberRow
            key={member.personId}
            member={member}
            self={member.personId === ownId}
            changeRole={changeRole(member.personId)}
            endMembership={endMembership(member.personId)}
          />
        ))}
      </tbody>
    </table>
  )
}
