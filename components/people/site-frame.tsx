import type { ReactNode } from 'react'
import { Shell } from '@/components/shell/shell'
import type { Viewer } from '@/lib/work/people/viewer'

/** The frame of the pages that belong to no campaign. */
export function SiteFrame({
  viewer,
  mayCreate,
  children,
}: {
  viewer: Viewer
  mayCreate: boolean
  children: ReactNode
}) {
  const links = [
    { href: '/', label: 'Campaigns', exact: true },
    ...(mayCreate ? [{ href: '/campaigns/new', label: 'New campaign' }] : []),
    { href: '/account', label: 'Your account' },
    ...(viewer.isAdmin
      ? [
          { href: '/admin/outbox', label: 'Outbox' },
          { href: '/admin/accounts', label: 'Accounts' },
        ]
      : []),
  ]
  return (
    <Shell viewerName={viewer.name} links={links}>
      <div className="mx-auto flex max-w-6xl flex-col gap-8 px-5 py-8 md:px-10">{children}</div>
    </Shell>
  )
}
