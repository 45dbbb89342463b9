import { WhatIfLoading } from '@/components/what-if/what-if-loading'

export default function Loading() {
  return <WhatIfLoading />
}
