import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { candidateQuery } from '@/components/candidates/candidate-query'
import { CandidatesScreen } from '@/components/candidates/candidates-screen'
import { PAGE_SIZE } from '@/components/table/table-state'
import { candidateTable } from '@/lib/work/catalogue/candidate-table'
import { viewsOf } from './views-of'
import { searchOf } from './search-of'

export const metadata: Metadata = { title: 'Candidates' }

/** Every member; what a grader has not graded yet is listed without what others made of it. */
export default async function CandidatesPage({ params, searchParams }: PageProps<'/campaigns/[slug]/candidates'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/candidates')
  const search = searchOf(await searchParams)
  const table = await candidateTable(db, permit, candidateQuery(permit.role, search, PAGE_SIZE))
  const views = await viewsOf(db, permit, 'candidates')
  return <CandidatesScreen slug={slug} role={permit.role} table={table} views={views} />
}
