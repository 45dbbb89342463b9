import { EvidenceLoading } from '@/components/evidence/evidence-loading'

export default function Loading() {
  return <EvidenceLoading />
}
