import type { BenchCandidate } from '@/lib/work/queue/lend-next'
import type { Supplied } from './bench-session'

/** Candidates as the queue gives them, for tests. */
export function benchCandidate(id: number, views = ['colour', 'deep', 'band:g']): BenchCandidate {
  return {
    id,
    name: `SWS-${id}`,
    raDeg: 150.1,
    decDeg: -2.2,
    views: views.map((key) => ({
      key,
      label: key.replace('band:', ''),
      url: `/stamps/${id}/${key}`,
      width: 80,
      height: 80,
      note: null,
      geometry: { pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true },
    })),
    geometry: { pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true },
    recipe: 1,
    closeFieldArcsec: 12,
    planesUrl: `/planes/${id}`,
  }
}

export function supply(ids: number[], counts: { given?: number; left?: number } = {}): Supplied {
  return {
    candidates: ids.map((id) => benchCandidate(id)),
    given: counts.given ?? 0,
    left: counts.left ?? ids.length,
    imaged: true,
  }
}
