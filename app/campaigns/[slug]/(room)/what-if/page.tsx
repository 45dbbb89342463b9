import type { Metadata } from 'next'
import { permitPage } from '@/app/_lib/page-permit'
import { WhatIfScreen } from '@/components/what-if/what-if-screen'
import { makeRuleAction } from './actions'

export const metadata: Metadata = { title: 'What if' }

/** Leads. The address holds the thresholds that are tried. */
export default async function WhatIfPage({ params, searchParams }: PageProps<'/campaigns/[slug]/what-if'>) {
  const { slug } = await params
  await permitPage(slug, 'lead', '/what-if')
  const query = Object.fromEntries(
    Object.entries(await searchParams).flatMap(([name, value]) => (typeof value === 'string' ? [[name, value]] : [])),
  )
  return <WhatIfScreen slug={slug} query={query} action={makeRuleAction.bind(null, slug)} />
}
