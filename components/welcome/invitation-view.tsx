import type { FormAction } from '@/components/people/use-kept-form'
import { ButtonLink } from '@/components/ui/button'
import type { InvitationView as Invitation } from '@/lib/work/people/accept-invitation'
import type { Viewer } from '@/lib/work/people/viewer'
import { Doorway } from './doorway'
import { AcceptForm, NewPersonForm, SwitchAccountButton } from './invitation-forms'

const CLOSED: Record<Exclude<Invitation['kind'], 'open'>, { title: string; lead: string }> = {
  unknown: {
    title: 'This is no invitation',
    lead: 'The address is incomplete or was never valid. Copy the whole link from the mail, or ask the lead who invited you to send it again.',
  },
  expired: {
    title: 'This invitation has expired',
    lead: 'An invitation holds for 14 days. Ask the lead who invited you to send it again.',
  },
  withdrawn: {
    title: 'This invitation no longer holds',
    lead: 'It was withdrawn, or a newer one took its place. Look for a newer mail, or ask the lead who invited you.',
  },
  used: {
    title: 'This invitation was accepted already',
    lead: 'It works once. If it was you, sign in and the campaign is among yours.',
  },
}

const TASK = {
  lead: 'a lead: you set the campaign up, invite people and settle splits',
  grader: 'a grader: you look at candidates and say how sure you are that each is a lens',
  viewer: 'a viewer: you read the catalogue and its evidence',
}

/** An invitation link: what it is for and the one thing to do, whoever opens it and in whatever state it is. */
export function InvitationView({
  invitation,
  viewer,
  here,
  passwordHint,
  acceptAsNewPerson,
  acceptAsViewer,
}: {
  invitation: Invitation
  viewer: Viewer | null
  here: string
  passwordHint: string
  acceptAsNewPerson: FormAction
  acceptAsViewer: FormAction
}) {
  if (invitation.kind !== 'open') {
    return (
      <Doorway {...CLOSED[invitation.kind]}>
        <ButtonLink href={viewer ? '/' : '/signin'} tone="lamp" className="self-start px-6">
          {viewer ? 'To your campaigns' : 'Sign in'}
        </ButtonLink>
      </Doorway>
    )
  }
  const { campaignName, email, role, invitedByName, hasAccount, slug } = invitation
  const theirs = viewer?.email.toLowerCase() === email.toLowerCase()
  const lead = `${invitedByName} invites ${theirs ? 'you' : email} as ${TASK[role]}.`
  return (
    <Doorway title={`Join ${campaignName}`} lead={lead}>
      {viewer && !theirs ? (
        <>
          <p className="max-w-sm">
            You are signed in as {viewer.email}. Only {email} can accept: change account, or ask {invitedByName} to
            invite the address that you use.
          </p>
          <SwitchAccountButton returnTo={here} />
        </>
      ) : theirs ? (
        <AcceptForm action={acceptAsViewer} />
      ) : hasAccount ? (
        <>
          <p className="max-w-sm">{email} has an account here. Sign in with it, then accept.</p>
          <ButtonLink href={`/signin?next=${encodeURIComponent(here)}`} tone="lamp" className="self-start px-6">
            Sign in to accept
          </ButtonLink>
        </>
      ) : (
        <NewPersonForm
          action={acceptAsNewPerson}
          email={email}
          campaignPath={`/campaigns/${slug}`}
          passwordHint={passwordHint}
        />
      )}
    </Doorway>
  )
}
