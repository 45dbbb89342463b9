import { sql, type Kysely } from 'kysely'
import type { DB } from '../schema'
import type { ReleaseEntry } from '../schema/releases'
import { among } from './by-ids'

/** A part of one zone (a tenth of a degree of declination, from the south pole), between two right ascensions. */
export interface ZoneWindow {
  zone: number
  fromRaDeg: number
  toRaDeg: number
}

export interface EntryPlace {
  id: number
  raDeg: number
  decDeg: number
}

const windowsAsJson = (windows: readonly ZoneWindow[]) =>
  JSON.stringify(windows.map(({ zone, fromRaDeg, toRaDeg }) => [zone, fromRaDeg, toRaDeg]))

/** Places in these windows, by the index of zones; at most `limit`. */
export function entriesInWindows(db: Kysely<DB>, releaseId: number, windows: readonly ZoneWindow[], limit: number) {
  // CROSS JOIN keeps SQLite from turning the loops round.
  return sql<EntryPlace>`
    select entry.id as id, entry.ra_deg as raDeg, entry.dec_deg as decDeg
    from json_each(${windowsAsJson(windows)}) part cross join release_entry entry
      on entry.release_id = ${releaseId} and entry.zone = json_extract(part.value, '$[0]')
      and entry.ra_deg between json_extract(part.value, '$[1]') and json_extract(part.value, '$[2]')
    limit ${limit}`
}

export async function listEntriesInWindows(
  db: Kysely<DB>,
  releaseId: number,
  windows: readonly ZoneWindow[],
  limit: number,
): Promise<EntryPlace[]> {
  return (await entriesInWindows(db, releaseId, windows, limit).execute(db)).rows
}

/** Places in one window in the order of the index, after one of them. */
export async function listEntriesInWindow(
  db: Kysely<DB>,
  releaseId: number,
  { zone, fromRaDeg, toRaDeg }: ZoneWindow,
  page: { after: EntryPlace | null; limit: number },
): Promise<EntryPlace[]> {
  const after = page.after ?? { raDeg: -1, decDeg: -100, id: 0 }
  const { rows } = await sql<EntryPlace>`
    select id, ra_deg as raDeg, dec_deg as decDeg from release_entry
    where release_id = ${releaseId} and zone = ${zone} and ra_deg between ${fromRaDeg} and ${toRaDeg}
      and (ra_deg, dec_deg, id) > (${after.raDeg}, ${after.decDeg}, ${after.id})
    order by ra_deg, dec_deg, id
    limit ${page.limit}`.execute(db)
  return rows
}

/** In no particular order. */
export async function listEntriesById(db: Kysely<DB>, ids: readonly number[]): Promise<ReleaseEntry[]> {
  return db.selectFrom('release_entry').selectAll().where('id', 'in', among(ids)).execute()
}
