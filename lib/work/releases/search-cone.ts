import 'server-only'
import type { Kysely } from 'kysely'
import {
  listEntriesById,
  listEntriesInWindow,
  listEntriesInWindows,
  type EntryPlace,
  type ZoneWindow,
} from '@/db/queries/release-cones'
import type { DB } from '@/db/schema'
import type { ReleaseEntry } from '@/db/schema/releases'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { coneHalfWidthDeg, separationArcsec, type SkyPosition } from '@/lib/science/sky/separation'

export interface Cone extends SkyPosition {
  radiusDeg: number
}

export interface FoundEntry extends ReleaseEntry {
  separationArcsec: number
}

export interface FoundPlaces {
  /** Nearest first; equally near ones in the order of the catalogue. */
  places: { id: number; separationArcsec: number }[]
  /** More are in the cone than were asked for. */
  overflow: boolean
}

const SLACK_DEG = 1e-7
const LAST_ZONE = 1800
/** Rows read in one go: some milliseconds. */
const AT_ONCE = 4000
const ZONES_AT_ONCE = 64
const ROWS_AT_ONCE = 500

/** The windows of right ascension, zone by zone, that hold a cone (Gray et al. 2004, MSR-TR-2004-32). */
export function windowsOf({ raDeg, decDeg, radiusDeg }: Cone): ZoneWindow[] {
  const half = coneHalfWidthDeg(decDeg, radiusDeg * 3600) + SLACK_DEG
  const ranges: [number, number][] =
    half >= 180
      ? [[0, 360]]
      : raDeg - half < 0
        ? [
            [0, raDeg + half],
            [raDeg - half + 360, 360],
          ]
        : raDeg + half >= 360
          ? [
              [0, raDeg + half - 360],
              [raDeg - half, 360],
            ]
          : [[raDeg - half, raDeg + half]]
  const zoneAt = (dec: number) => Math.min(LAST_ZONE, Math.max(0, Math.floor((dec + 90) * 10)))
  const windows: ZoneWindow[] = []
  const last = zoneAt(decDeg + radiusDeg + SLACK_DEG)
  for (let zone = zoneAt(decDeg - radiusDeg - SLACK_DEG); zone <= last; zone++) {
    for (const [fromRaDeg, toRaDeg] of ranges) windows.push({ zone, fromRaDeg, toRaDeg })
  }
  return windows
}

/**
 * The nearest entries of a release in a cone, its rim included. Memory is that of the answer, whatever the cone holds; between pieces
 * others have their turn. @param signal ends the search when its asker has gone.
 */
export async function searchCone(
  db: Kysely<DB>,
  releaseId: number,
  cone: Cone,
  most: number,
  signal?: AbortSignal,
): Promise<FoundPlaces> {
  let places: FoundPlaces['places'] = []
  let overflow = false
  let radiusArcsec = cone.radiusDeg * 3600
  const keepNearest = () => {
    places.sort((a, b) => a.separationArcsec - b.separationArcsec || a.id - b.id)
    if (places.length <= most) return
    overflow = true
    places = places.slice(0, most)
    // What is farther than the farthest of these cannot come in any more.
    radiusArcsec = places[most - 1]?.separationArcsec ?? radiusArcsec
  }
  for await (const page of placesInWindows(db, releaseId, windowsOf(cone))) {
    for (const place of page) {
      const separation = separationArcsec(cone, place)
      if (separation > cone.radiusDeg * 3600) continue
      if (separation > radiusArcsec) overflow = true
      else places.push({ id: place.id, separationArcsec: separation })
    }
    if (places.length > 2 * most + AT_ONCE) keepNearest()
    signal?.throwIfAborted()
  }
  keepNearest()
  return { places, overflow }
}

async function* placesInWindows(
  db: Kysely<DB>,
  releaseId: number,
  windows: ZoneWindow[],
): AsyncGenerator<EntryPlace[], void, void> {
  for (let from = 0; from < windows.length; from += ZONES_AT_ONCE) {
    if (from > 0) await giveWay()
    const part = windows.slice(from, from + ZONES_AT_ONCE)
    const found = await listEntriesInWindows(db, releaseId, part, AT_ONCE + 1)
    if (found.length <= AT_ONCE) yield found
    else for (const window of part) yield* placesInWindow(db, releaseId, window)
  }
}

async function* placesInWindow(
  db: Kysely<DB>,
  releaseId: number,
  window: ZoneWindow,
): AsyncGenerator<EntryPlace[], void, void> {
  for (let after: EntryPlace | null = null; ;) {
    const page: EntryPlace[] = await listEntriesInWindow(db, releaseId, window, { after, limit: AT_ONCE })
    yield page
    if (page.length < AT_ONCE) return
    after = page[page.length - 1]
    await giveWay()
  }
}

/** The entries at these places, in their order, read as they are taken. */
export async function* entriesAt(
  db: Kysely<DB>,
  places: FoundPlaces['places'],
): AsyncGenerator<FoundEntry, void, void> {
  for (let from = 0; from < places.length; from += ROWS_AT_ONCE) {
    if (from > 0) await giveWay()
    const part = places.slice(from, from + ROWS_AT_ONCE)
    const rows = await listEntriesById(
      db,
      part.map(({ id }) => id),
    )
    const byId = new Map(rows.map((row) => [row.id, row]))
    for (const { id, separationArcsec } of part) {
      const row = byId.get(id)
      if (row) yield { ...row, separationArcsec }
    }
  }
}
