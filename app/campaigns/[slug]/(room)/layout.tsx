import { permitPage } from '@/app/_lib/page-permit'
import { Shell, type ShellLink } from '@/components/shell/shell'
import { campaignCounts } from '@/lib/work/campaigns/campaign-counts'

/** The places of one campaign. What each page shows is checked by the page itself: layouts do not run again on navigation. */
export default async function CampaignLayout({ params, children }: LayoutProps<'/campaigns/[slug]'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read')
  const counts = await campaignCounts(db, permit)
  const home = `/campaigns/${slug}`
  const lead = permit.role === 'lead'
  const links: ShellLink[] = [
    { href: home, label: 'Overview', exact: true },
    ...(permit.role === 'viewer' ? [] : [{ href: `${home}/bench`, label: 'Bench' }]),
    ...(lead ? [{ href: `${home}/intake`, label: 'Intake' }] : []),
    // Without counts for graders: what leaves out calibration stamps beside a list that hides them would give their number away.
    {
      href: `${home}/candidates`,
      label: 'Candidates',
      count: permit.role === 'grader' ? undefined : counts.candidates,
    },
    ...(lead ? [{ href: `${home}/splits`, label: 'Splits', count: counts.split }] : []),
    { href: `${home}/catalogue`, label: 'Catalogue', count: permit.role === 'grader' ? undefined : counts.confirmed },
    ...(lead
      ? [
          { href: `${home}/people`, label: 'People' },
          { href: `${home}/settings`, label: 'Settings' },
        ]
      : []),
  ]
  return (
    <Shell viewerName={`${permit.viewer.name}, ${permit.role}`} heading={permit.campaign.name} links={links}>
      {children}
    </Shell>
  )
}
