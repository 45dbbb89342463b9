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

/** Steps of density, each twice the one before, from the least to the most; few enough to be told apart. */
export function densityStep(count: number, most: number, steps: number): number {
  if (most <= 1) return steps
  return Math.max(1, Math.min(steps, Math.ceil((Math.log(count + 1) / Math.log(most + 1)) * steps)))
}
