import { PageSkeleton } from '@/components/campaigns/page-skeleton'

export default function LoadingReleases() {
  return <PageSkeleton />
}
