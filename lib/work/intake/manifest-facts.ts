import type { ManifestRow } from '@/db/schema/intake'
import type { Truth } from './told-truth'

/** What manifests tell of a candidate; null where none does. */
export interface ManifestFacts {
  raDeg: number | null
  decDeg: number | null
  pixelScaleArcsec: number | null
  score: number | null
  lensRedshift: number | null
  sourceRedshift: number | null
  /** Known of calibration stamps, which it makes them. */
  truth: Truth | null
  explanation: string | null
}

/** The newest line that tells something stands, fact by fact; right ascension and declination belong together. */
export function manifestFacts(rows: readonly ManifestRow[]): ManifestFacts {
  const newest = rows.toSorted((a, b) => b.id - a.id)
  const placed = newest.find((row) => row.ra_deg !== null && row.dec_deg !== null)
  const first = <K extends keyof ManifestRow>(key: K) => newest.find((row) => row[key] !== null)?.[key] ?? null
  return {
    raDeg: placed?.ra_deg ?? null,
    decDeg: placed?.dec_deg ?? null,
    pixelScaleArcsec: first('pixel_scale_arcsec'),
    score: first('score'),
    lensRedshift: first('lens_redshift'),
    sourceRedshift: first('source_redshift'),
    truth: first('truth'),
    explanation: first('explanation'),
  }
}
