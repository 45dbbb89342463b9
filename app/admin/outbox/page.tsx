import type { Metadata } from 'next'
import { permitSitePage } from '@/app/_lib/site-page-permit'
import { OutboxView } from '@/components/people/outbox-view'
import { SiteFrame } from '@/components/people/site-frame'
import { database } from '@/lib/platform/database'
import { listOutbox } from '@/lib/work/people/outbox'
import { retryMailAction } from '../actions'

// Messages hold secret links: no other site may learn this page's address or theirs from the browser.
export const metadata: Metadata = { title: 'Outbox', referrer: 'no-referrer' }

export default async function OutboxPage({ searchParams }: PageProps<'/admin/outbox'>) {
  const permit = await permitSitePage('/admin/outbox')
  const { before } = await searchParams
  const number = Number(before)
  const beforeId = Number.isSafeInteger(number) && number > 0 ? number : undefined
  const outbox = await listOutbox(await database(), permit, beforeId)
  return (
    <SiteFrame viewer={permit.viewer} mayCreate>
      <OutboxView
        outbox={outbox}
        paged={beforeId !== undefined}
        retry={(mailId) => retryMailAction.bind(null, mailId)}
      />
    </SiteFrame>
  )
}
