import type { ReleaseEntry, ReleasedLabel } from '@/db/schema/releases'
import { fromJson, type Json } from '@/db/schema/values'
import { viewPlace } from '@/lib/science/imaging/recipe'
import { remarksFromText, type Remark } from '@/lib/work/catalogue/remarks'

export interface Votes {
  A: number
  B: number
  C: number
  N: number
  U: number
}

/** A row of a release's table. */
export interface EntryRow {
  key: string
  designation: string
  name: string
  raDeg: number
  decDeg: number
  class: 'A' | 'B' | 'C' | null
  mean: number | null
  spread: number | null
  probability: number | null
  votes: Votes
  knownAs: ReleasedLabel[]
  einsteinRadiusArcsec: number | null
  einsteinRadiusErrorArcsec: number | null
  thumbnail: string | null
}

/** What its own page says beside. */
export interface EntryDetail extends EntryRow {
  decidedBy: 'verdict' | 'ruling'
  reason: string
  remarks: Remark[]
  tags: string | null
  nMeasured: number
  scatterArcsec: number | null
  measuredBy: string[]
  lensRedshift: number | null
  sourceRedshift: number | null
  enteredAt: string | null
  stamps: { view: string; sha256: string }[]
}

export function entryRow(row: ReleaseEntry): EntryRow {
  return {
    key: row.entry_key,
    designation: row.designation,
    name: row.name,
    raDeg: row.ra_deg,
    decDeg: row.dec_deg,
    class: row.class,
    mean: row.mean,
    spread: row.spread,
    probability: row.probability,
    votes: { A: row.votes_a, B: row.votes_b, C: row.votes_c, N: row.votes_n, U: row.cannot_judge },
    knownAs: fromJson(row.known_as),
    einsteinRadiusArcsec: row.einstein_radius_arcsec,
    einsteinRadiusErrorArcsec: row.einstein_radius_error_arcsec,
    thumbnail: row.thumbnail,
  }
}

export function entryDetail(row: ReleaseEntry): EntryDetail {
  // As lib/work/measuring told it when the release was frozen.
  const measured = row.measurement
    ? fromJson(row.measurement as Json<{ scatterArcsec?: number | null; by?: string[] }>)
    : {}
  return {
    ...entryRow(row),
    decidedBy: row.decided_by === 'ruling' ? 'ruling' : 'verdict',
    reason: row.reason,
    remarks: remarksFromText(row.remarks),
    tags: row.tags,
    nMeasured: row.n_measured,
    scatterArcsec: measured.scatterArcsec ?? null,
    measuredBy: measured.by ?? [],
    lensRedshift: row.lens_redshift,
    sourceRedshift: row.source_redshift,
    enteredAt: row.entered_at,
    stamps: Object.entries(fromJson(row.stamps))
      .map(([view, sha256]) => ({ view, sha256 }))
      .toSorted((a, b) => viewPlace(a.view) - viewPlace(b.view)),
  }
}
