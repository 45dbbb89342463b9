import { SplitsLoading } from '@/components/splits/splits-loading'

export default function Loading() {
  return <SplitsLoading />
}
