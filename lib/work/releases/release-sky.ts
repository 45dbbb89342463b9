import 'server-only'
import type { Kysely } from 'kysely'
import { listEntriesOnSky, type EntryOnSky } from '@/db/queries/release-pages'
import type { DB } from '@/db/schema'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { cellAt, cellBounds, equalAreaGrid, type CellBounds } from '@/lib/science/sky/equal-area-grid'
import { skyExtent, type SkyExtent } from '@/lib/science/sky/sky-extent'
import type { SkyPosition } from '@/lib/science/sky/separation'

export interface SkyCell extends CellBounds {
  count: number
}

/** What a map of a release shows: each entry where they are few, how many lie in each cell where they are many. */
export type ReleaseSky = { extent: SkyExtent | null; entries: number } & (
  { kind: 'points'; points: EntryOnSky[] } | { kind: 'cells'; cells: SkyCell[]; cellAreaDeg2: number }
)

/** Beyond this many, single points would hide how dense they lie. */
const MOST_POINTS = 2000
/** A survey has about this many cells across. */
const CELLS_ACROSS = 20
const WHOLE_SKY_RADIUS_DEG = 90
const PAGE = 5000
const KEPT = 20

/** A release never changes, so its map is worked out once. */
const kept = new Map<number, Promise<ReleaseSky>>()

export function releaseSky(db: Kysely<DB>, releaseId: number): Promise<ReleaseSky> {
  const known = kept.get(releaseId)
  if (known) return known
  const made = makeSky(db, releaseId)
  kept.set(releaseId, made)
  made.catch(() => kept.delete(releaseId))
  if (kept.size > KEPT) kept.delete(kept.keys().next().value as number)
  return made
}

async function makeSky(db: Kysely<DB>, releaseId: number): Promise<ReleaseSky> {
  const points: EntryOnSky[] = []
  const places: SkyPosition[] = []
  for (let after = 0; ; await giveWay()) {
    const page = await listEntriesOnSky(db, releaseId, { after, limit: PAGE })
    for (const one of page) {
      if (points.length <= MOST_POINTS) points.push(one)
      places.push({ raDeg: one.raDeg, decDeg: one.decDeg })
    }
    if (page.length < PAGE) break
    after = page[page.length - 1].rowNumber
  }
  const extent = skyExtent(places)
  const about = { extent, entries: places.length }
  return places.length <= MOST_POINTS ? { ...about, kind: 'points', points } : { ...about, ...inCells(places, extent) }
}

function inCells(
  places: readonly SkyPosition[],
  extent: SkyExtent | null,
): { kind: 'cells'; cells: SkyCell[]; cellAreaDeg2: number } {
  const radiusDeg = Math.min(WHOLE_SKY_RADIUS_DEG, extent?.radiusDeg ?? WHOLE_SKY_RADIUS_DEG)
  const grid = equalAreaGrid((2 * radiusDeg) / CELLS_ACROSS)
  const counts = new Map<number, number>()
  for (const { raDeg, decDeg } of places) {
    const cell = cellAt(grid, raDeg, decDeg)
    counts.set(cell, (counts.get(cell) ?? 0) + 1)
  }
  const cells = [...counts].toSorted(([a], [b]) => a - b).map(([cell, count]) => ({ ...cellBounds(grid, cell), count }))
  return { kind: 'cells', cells, cellAreaDeg2: grid.areaDeg2 }
}
