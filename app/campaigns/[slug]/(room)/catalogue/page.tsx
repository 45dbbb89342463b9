import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { CatalogueScreen } from '@/components/catalogue/catalogue-screen'
import { catalogueTable } from '@/lib/work/catalogue/catalogue-table'
import { GRADE_CLASS_RULE } from '@/lib/work/catalogue/grade-class'

export const metadata: Metadata = { title: 'Catalogue' }

/** Every member; a grader sees the entries they have graded. Sorting and filtering happen in the browser. */
export default async function CataloguePage({ params }: PageProps<'/campaigns/[slug]/catalogue'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read', '/catalogue')
  const catalogue = await catalogueTable(db, permit)
  const home = `/campaigns/${slug}`
  const next = {
    lead: { href: `${home}/splits`, label: 'See what is split' },
    grader: { href: `${home}/bench`, label: 'Go to the bench' },
    viewer: { href: `${home}/candidates`, label: 'See all candidates' },
  }[permit.role]
  return <CatalogueScreen slug={slug} catalogue={catalogue} classRule={GRADE_CLASS_RULE} next={next} />
}
