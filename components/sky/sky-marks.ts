import { geoPath, type GeoProjection } from 'd3-geo'
import type { CellBounds } from '@/lib/science/sky/equal-area-grid'

/** Along a border of equal declination, which is no great circle, points this far apart at most. */
const ALONG_DEG = 5

/** The outline of a cell; empty where it lies outside of the map. */
export function cellPath(projection: GeoProjection, bounds: CellBounds): string {
  const { westRaDeg, eastRaDeg, southDecDeg, northDecDeg } = bounds
  const pieces = Math.max(1, Math.ceil((eastRaDeg - westRaDeg) / ALONG_DEG))
  const along = Array.from({ length: pieces + 1 }, (_, k) => westRaDeg + ((eastRaDeg - westRaDeg) * k) / pieces)
  // d3-geo takes rings clockwise as seen from outside: north-west to north-east, then back in the south.
  const ring = [
    ...along.map((ra): [number, number] => [ra, northDecDeg]),
    ...along.toReversed().map((ra): [number, number] => [ra, southDecDeg]),
  ]
  return geoPath(projection).digits(1)({ type: 'Polygon', coordinates: [[...ring, ring[0]]] }) ?? ''
}

/** The step of density of a count, 1 to `steps`, by its root: few beside many can still be told apart. */
export function densityStep(count: number, most: number, steps: number): number {
  return Math.max(1, Math.min(steps, Math.ceil(Math.sqrt(count / most) * steps)))
}
