import { notFound } from 'next/navigation'
import { permitPage } from '@/app/_lib/page-permit'
import { ListScreen } from '@/components/matching/list-screen'
import { blobs } from '@/lib/platform/storage/blobs'
import { Problem } from '@/lib/platform/problems/problem'
import { knownList } from '@/lib/work/matching/known-page'
import { listReader } from '@/lib/work/matching/list-reader'
import { lookAtUpload } from '@/lib/work/matching/upload-list'
import {
  bringBackListAction,
  changeListAction,
  discardListAction,
  retireListAction,
  takeInListAction,
} from '../actions'

export const metadata = { title: 'List of known objects' }

/** Leads: what a list is, which of its columns hold what, and how far it matches. */
export default async function KnownListRoute({ params }: PageProps<'/campaigns/[slug]/known/[id]'>) {
  const { slug, id: text } = await params
  if (!/^\d{1,15}$/.test(text)) notFound()
  const id = Number(text)
  const { db, permit } = await permitPage(slug, 'lead', `/known/${id}`)
  const list = await knownList(db, permit, id).catch((error: unknown) => {
    if (error instanceof Problem && error.status === 404) notFound()
    throw error
  })
  const look = await lookAtUpload(db, permit, { store: blobs(), reader: listReader }, id, null)
  return (
    <ListScreen
      key={`${list.id} ${list.state}`}
      slug={slug}
      list={list}
      look={look}
      takeInAction={takeInListAction.bind(null, slug, id)}
      changeAction={changeListAction.bind(null, slug, id)}
      retireAction={retireListAction.bind(null, slug, id)}
      discardAction={discardListAction.bind(null, slug, id)}
      bringBackAction={bringBackListAction.bind(null, slug, id)}
    />
  )
}
