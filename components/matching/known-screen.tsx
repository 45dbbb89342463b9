'use client'

import { useEffect, useState } from 'react'
import { counted } from '@/components/campaigns/in-words'
import { PageHead } from '@/components/campaigns/page-head'
import { EmptyState } from '@/components/ui/notice'
import type { KnownPage } from '@/lib/work/matching/known-page'
import { askKnown } from './known-api'
import { ListTable } from './list-table'
import { ListUpload } from './list-upload'

const LOOK_AGAIN_MS = 1200

/** The lists of known objects, how many candidates each knows, and where a lead sends another. */
export function KnownScreen({ slug, isLead, first }: { slug: string; isLead: boolean; first: KnownPage }) {
  const [page, setPage] = useState(first)
  const [shown, setShown] = useState(first)
  // A page that comes from the server again, after an action, is newer than what was asked for.
  if (shown !== first) {
    setShown(first)
    setPage(first)
  }
  const { lists, known, due } = page
  const isBusy = due > 0 || lists.some(({ state, work }) => state === 'reading' || work !== null)
  useEffect(() => {
    if (!isBusy) return
    const timer = setInterval(() => void askKnown(slug).then(setPage, () => {}), LOOK_AGAIN_MS)
    return () => clearInterval(timer)
  }, [slug, isBusy])
  const inForce = lists.filter(({ state }) => state === 'ready')

  return (
    <div className="mx-auto flex max-w-6xl flex-col gap-7 px-4 py-6 md:px-8 md:py-8">
      <PageHead
        title={
          lists.length === 0
            ? 'No list of known objects yet'
            : inForce.length === 0
              ? 'No list of known objects is in force'
              : known === 0
                ? 'No candidate is a known object'
                : `${counted(known, 'candidate')} ${known === 1 ? 'is a known object' : 'are known objects'}`
        }
        lead={
          <>
            Candidates within a list’s radius of one of its objects are labelled with its name wherever they show, and a
            list can keep them out of what is called new. A label says that something is at this place, not that it is
            the same.
            {due > 0 ? (
              <span role="status" className="block">
                {counted(due, 'candidate')} {due === 1 ? 'is' : 'are'} being matched.
              </span>
            ) : null}
          </>
        }
      />
      {lists.length > 0 ? <ListTable slug={slug} lists={lists} isLead={isLead} /> : null}
      {isLead ? (
        <ListUpload slug={slug} />
      ) : lists.length === 0 ? (
        <EmptyState title="Nothing to match with">
          <p>A lead of this campaign has still to send a list of known lenses or other objects.</p>
        </EmptyState>
      ) : null}
    </div>
  )
}
