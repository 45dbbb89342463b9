/** The bands that combined views are made of, on one grid. */
import { matchScales } from './match-scales'
import { normalisePlane, type BandPlane, type NormalisedPlane } from './normalise-planes'

/**
 * Brings bands to one grid for the combined views.
 * @param native the same planes normalised.
 * @returns all planes, `group` those of the commonest size, which the combined views are made of, and what was resampled.
 */
export function commonGrid(
  planes: BandPlane[],
  native: NormalisedPlane[],
): { all: NormalisedPlane[]; group: NormalisedPlane[]; note: string | null } {
  const matched = matchScales(planes)
  const all = matched.planes.map((plane, k) => (plane === planes[k] ? native[k] : normalisePlane(plane)))
  return { all, group: largestGroup(all), note: matched.note }
}

/** The planes that share the commonest size, in order; of equally common sizes that with the most pixels. */
function largestGroup(planes: NormalisedPlane[]): NormalisedPlane[] {
  const groups = new Map<string, NormalisedPlane[]>()
  for (const plane of planes) {
    const size = `${plane.width}x${plane.height}`
    groups.set(size, [...(groups.get(size) ?? []), plane])
  }
  const usable = (group: NormalisedPlane[]) => group.filter((plane) => plane.state === 'usable').length
  return [...groups.values()].reduce<NormalisedPlane[]>((best, group) => {
    if (best.length === 0) return group
    const more = usable(group) - usable(best) || group[0].values.length - best[0].values.length
    return more > 0 ? group : best
  }, [])
}
