import type { Metadata } from 'next'
import { InvitationView } from '@/components/welcome/invitation-view'
import { database } from '@/lib/platform/database'
import { readInvitation } from '@/lib/work/people/accept-invitation'
import { PASSWORD_HINT } from '@/lib/work/people/passwords'
import { getViewer } from '@/lib/work/people/session'
import { acceptAsNewPersonAction, acceptAsViewerAction } from './actions'

// The address holds a secret: no other site may learn it from the browser.
export const metadata: Metadata = { title: 'Invitation', referrer: 'no-referrer', robots: { index: false } }

export default async function InvitationPage({ params }: PageProps<'/invitation/[token]'>) {
  const { token } = await params
  const [invitation, viewer] = await Promise.all([readInvitation(await database(), token), getViewer()])
  return (
    <InvitationView
      invitation={invitation}
      viewer={viewer}
      here={`/invitation/${token}`}
      passwordHint={PASSWORD_HINT}
      acceptAsNewPerson={acceptAsNewPersonAction.bind(null, token)}
      acceptAsViewer={acceptAsViewerAction.bind(null, token)}
    />
  )
}
