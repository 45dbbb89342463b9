/** Planes that views are made of and that are costly to make, or not the same when made of coded pixels: made once, sent with the bands. */
import { bluePlane } from './arc-views'
import { clippedOf, withClipped } from './clipped-pixels'
import { commonGrid } from './common-grid'
import { removeLensLight } from './lens-light'
import { normalisePlane, type BandPlane, type NormalisedPlane } from './normalise-planes'
import type { PlaneRole } from './plane-codec'
import type { Recipe } from './recipe'

export interface DerivedPlane {
  role: PlaneRole
  plane: NormalisedPlane
}

export interface Derived {
  planes: DerivedPlane[]
  /** Clipped pixels of the bands on the grid that they are combined on, by band. */
  clipped: Record<string, readonly number[]>
}

/** Those that the recipe's views want: the bands without the lens's light, and the shortest band minus the longest. */
export function derivedPlanes(planes: BandPlane[], recipe: Recipe): Derived {
  const usable = commonGrid(planes, planes.map(normalisePlane))
    .group.filter((plane) => plane.state === 'usable')
    .map(withClipped)
  const derived: DerivedPlane[] = []
  if (recipe.views.includes('residual')) {
    for (const plane of removeLensLight(usable).residuals) derived.push({ role: 'residual', plane })
  }
  if (recipe.views.includes('blue') && usable.length > 1) {
    derived.push({ role: 'blue', plane: bluePlane(usable).plane })
  }
  return { planes: derived, clipped: Object.fromEntries(usable.map((plane) => [plane.band, clippedOf(plane)])) }
}
