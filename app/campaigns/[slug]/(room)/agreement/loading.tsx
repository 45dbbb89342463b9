import { PageSkeleton } from '@/components/campaigns/page-skeleton'

export default function Loading() {
  return <PageSkeleton />
}
