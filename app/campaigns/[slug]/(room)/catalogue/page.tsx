import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { catalogueQuery } from '@/components/catalogue/catalogue-query'
import { CatalogueScreen } from '@/components/catalogue/catalogue-screen'
import { PAGE_SIZE } from '@/components/table/table-state'
import { catalogueTable } from '@/lib/work/catalogue/catalogue-table'
import { GRADE_CLASS_RULE } from '@/lib/work/catalogue/grade-class'
import { searchOf } from '../candidates/search-of'
import { viewsOf } from '../candidates/views-of'

export const metadata: Metadata = { title: 'Catalogue' }

/** Every member; a grader sees the entries they have graded. */
export default async function CataloguePage({ params, searchParams }: PageProps<'/campaigns/[slug]/catalogue'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/catalogue')
  const catalogue = await catalogueTable(db, permit, catalogueQuery(searchOf(await searchParams), PAGE_SIZE))
  const views = await viewsOf(db, permit, 'catalogue')
  const home = `/campaigns/${slug}`
  const next = {
    lead: { href: `${home}/splits`, label: 'See what is split' },
    grader: { href: `${home}/bench`, label: 'Go to the bench' },
    viewer: { href: `${home}/candidates`, label: 'See all candidates' },
  }[permit.role]
  return <CatalogueScreen slug={slug} catalogue={catalogue} classRule={GRADE_CLASS_RULE} next={next} views={views} />
}
