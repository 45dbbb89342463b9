import type { BenchCandidate } from '@/lib/work/queue/lend-next'

/** The view that a candidate begins with: the first that has a picture. */
export function firstView(candidate: BenchCandidate | undefined): { view: string | null; previousView: null } {
  const shown = candidate?.views.find(({ url }) => url !== null) ?? candidate?.views[0]
  return { view: shown?.key ?? null, previousView: null }
}
