import type { Role } from '@/db/schema/people'
import type { MailText } from '@/lib/platform/mail/queue-mail'

const TASK: Record<Role, string> = {
  lead: 'As a lead you set the campaign up, invite people, settle splits and publish the catalogue.',
  grader: 'As a grader you look at candidates one by one and say how sure you are that each is a lens.',
  viewer: 'As a viewer you read the catalogue and the evidence behind it.',
}

export const INVITATION_DAYS = 14

/** What an invited person reads. One line of subject: a name with a line break in it must not become a header. */
export function invitationMail(invitation: {
  email: string
  role: Role
  campaignName: string
  survey: string
  invitedBy: string
  link: string
}): MailText {
  const { campaignName, survey, invitedBy, role, link } = invitation
  return {
    recipient: invitation.email,
    subject: `Join “${campaignName}” as a ${role}`.replace(/\s+/g, ' '),
    body: [
      `${invitedBy} invites you to the campaign “${campaignName}” (${survey}), a search for strong gravitational lenses.`,
      TASK[role],
      `Open this link within ${INVITATION_DAYS} days to accept. It works once:`,
      link,
      'If you did not expect this, leave it: nothing happens without the link.',
    ].join('\n\n'),
  }
}
