import type { ListedPublicRelease } from '@/components/public/release-list'
import type { PublicRelease, PublicReleases } from '@/lib/work/releases/newest-standing'

export function listed(
  { release, correctedBy, retractedBy }: PublicRelease,
  standing: PublicReleases['standing'],
): ListedPublicRelease {
  return {
    slug: release.slug,
    number: release.number,
    kind: release.kind,
    title: release.title,
    campaign: release.campaign_name,
    survey: release.survey,
    frozenAt: release.created_at,
    entries: release.entries,
    correctedBy,
    retractedBy,
    standing: standing?.id === release.id,
  }
}
