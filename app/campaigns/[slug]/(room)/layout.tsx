import { permitPage } from '@/app/_lib/page-permit'
import { WaitingNotice } from '@/components/bench/waiting-notice'
import { Shell, type ShellLink } from '@/components/shell/shell'
import { campaignCounts } from '@/lib/work/campaigns/campaign-counts'
import { practiceUseful } from '@/lib/work/calibration/practice'
import { waitingFor } from '@/lib/work/discussion/list-mentions'
import { mayPass } from '@/lib/work/sheet/may-pass'

/** The places of one campaign. What each page shows is checked by the page itself: layouts do not run again on navigation. */
export default async function CampaignLayout({ params, children }: LayoutProps<'/campaigns/[slug]'>) {
  const { slug } = await params
  const { db, permit } = await permitPage(slug, 'read')
  const counts = await campaignCounts(db, permit)
  const home = `/campaigns/${slug}`
  const lead = permit.role === 'lead'
  // None for graders: a number that leaves calibration stamps out beside a list that hides them would give their number away.
  const count = (field: keyof typeof counts) =>
    permit.role === 'grader' ? undefined : { url: `/api/campaigns/${slug}/counts`, field, initial: counts[field] }
  const passes = permit.campaign.uses_sheet === 1 && (await mayPass(db, permit))
  const links: ShellLink[] = [
    { href: home, label: 'Overview', exact: true },
    ...(passes ? [{ href: `${home}/sheet`, label: 'First pass' }] : []),
    ...(permit.role === 'viewer' ? [] : [{ href: `${home}/bench`, label: 'Bench' }]),
    ...((await practiceUseful(db, permit)) ? [{ href: `${home}/practice`, label: 'Practice' }] : []),
    ...(permit.role === 'viewer' ? [] : [{ href: `${home}/me`, label: 'Your looks' }]),
    ...(lead ? [{ href: `${home}/intake`, label: 'Intake' }] : []),
    { href: `${home}/candidates`, label: 'Candidates', count: count('candidates') },
    ...(permit.role === 'grader' ? [] : [{ href: `${home}/known`, label: 'Known objects' }]),
    ...(lead
      ? [
          { href: `${home}/duplicates`, label: 'Duplicates' },
          { href: `${home}/splits`, label: 'Splits', count: count('split') },
          { href: `${home}/what-if`, label: 'What if' },
        ]
      : []),
    ...(permit.role === 'grader' ? [] : [{ href: `${home}/agreement`, label: 'Agreement' }]),
    { href: `${home}/catalogue`, label: 'Catalogue', count: count('confirmed') },
    ...(permit.role === 'grader' ? [] : [{ href: `${home}/releases`, label: 'Releases' }]),
    ...(lead
      ? [
          { href: `${home}/calibration`, label: 'Calibration' },
          { href: `${home}/people`, label: 'People' },
          { href: `${home}/settings`, label: 'Settings' },
        ]
      : []),
  ]
  return (
    <Shell
      viewerName={`${permit.viewer.name}, ${permit.role}`}
      heading={permit.campaign.name}
      links={links}
      waiting={{ home, url: `/api/campaigns/${slug}/waiting`, initial: await waitingFor(db, permit) }}
    >
      {permit.role === 'viewer' ? null : <WaitingNotice personId={permit.viewer.id} className="px-5 pt-4 md:px-10" />}
      {children}
    </Shell>
  )
}
