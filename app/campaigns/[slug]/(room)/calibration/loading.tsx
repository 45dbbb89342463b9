import { PageSkeleton } from '@/components/campaigns/page-skeleton'

export default function LoadingCalibration() {
  return <PageSkeleton />
}
