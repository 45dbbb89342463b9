import type { ReactNode } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import type { CampaignPeople } from '@/lib/work/people/list-people'
import { InvitationRow } from './invitation-row'
import { InviteForm } from './invite-form'
import { MemberTable } from './member-table'
import type { FormAction } from './use-kept-form'

/** Who is in the campaign, who is asked to be, and the form that asks. */
export function PeopleView({
  people,
  asked,
  ownId,
  invite,
  sendAgain,
  withdraw,
  changeRole,
  endMembership,
}: {
  people: CampaignPeople
  /** Looks that wait for their answer. */
  asked: ReactNode
  ownId: number
  invite: FormAction
  sendAgain: (invitationId: number) => FormAction
  withdraw: (invitationId: number) => FormAction
  changeRole: (personId: number) => FormAction
  endMembership: (personId: number) => FormAction
}) {
  const { members, invitations } = people
  const graders = members.filter((member) => member.role !== 'viewer').length
  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">
      <PageHead
        title={`${counted(members.length, 'person', 'people')}, ${graders.toLocaleString('en')} of whom may grade`}
        lead="A pseudonym stands for each person in published files. It never changes and is never given twice."
      />
      <div className="grid gap-x-12 gap-y-10 xl:grid-cols-[minmax(0,1fr)_20rem]">
        <div className="flex min-w-0 flex-col gap-10">
          <MemberTable members={members} ownId={ownId} changeRole={changeRole} endMembership={endMembership} />
          {asked}
          <section className="flex flex-col gap-2" aria-labelledby="open-invitations">
            <h2 id="open-invitations" className="text-title font-semibold">
              {invitations.length
                ? `${counted(invitations.length, 'invitation')} without an answer`
                : 'No open invitations'}
            </h2>
            {invitations.length ? (
              <ul className="border-t border-line">
                {invitations.map((invitation) => (
                  <InvitationRow
                    key={invitation.id}
                    invitation={invitation}
                    sendAgain={sendAgain(invitation.id)}
                    withdraw={withdraw(invitation.id)}
                  />
                ))}
              </ul>
            ) : (
              <p className="text-mute">Everybody who was invited has answered, or the invitation was withdrawn.</p>
            )}
          </section>
        </div>
        <section className="flex flex-col gap-4" aria-labelledby="invite">
          <h2 id="invite" className="text-title font-semibold">
            Invite people
          </h2>
          <InviteForm action={invite} mailLeavesSite={people.mailLeavesSite} />
        </section>
      </div>
    </div>
  )
}
