import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { AskedLooksList } from '@/components/people/asked-looks'
import { PeopleView } from '@/components/people/people-view'
import { openAsks } from '@/lib/work/discussion/list-asks'
import { listPeople } from '@/lib/work/people/list-people'
import { changeRoleAction, endMembershipAction, inviteAction, sendAgainAction, withdrawAction } from './actions'

export const metadata: Metadata = { title: 'People' }

export default async function PeoplePage({ params }: PageProps<'/campaigns/[slug]/people'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'lead', '/people')
  return (
    <PeopleView
      people={await listPeople(db, permit)}
      asked={<AskedLooksList slug={slug} asks={await openAsks(db, permit)} />}
      ownId={permit.viewer.id}
      invite={inviteAction.bind(null, slug)}
      sendAgain={(id) => sendAgainAction.bind(null, slug, id)}
      withdraw={(id) => withdrawAction.bind(null, slug, id)}
      changeRole={(id) => changeRoleAction.bind(null, slug, id)}
      endMembership={(id) => endMembershipAction.bind(null, slug, id)}
    />
  )
}
