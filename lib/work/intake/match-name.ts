import type { ManifestRow } from '@/db/schema/intake'
import type { NameMatcher } from './name-pattern'
import { sameBand } from './name-pattern'
import { bandOfFilter } from './band-of-header'
import { foreignBand, type Refusal } from './refusals'

/** What a manifest and the campaign's pattern tell of a file before it is opened; null is left to its header. */
export interface NameMatch {
  candidate: string | null
  band: string | null
  refusal: Refusal | null
  /** The manifest's lines for this file, for position and score. */
  rows: ManifestRow[]
}

const lower = (text: string): string => text.toLowerCase()

/** The lines that mean this file: those with its whole path, else those whose path ends as its own does, else its base name. */
export function rowsOfFile(name: string, rowsOfBase: readonly ManifestRow[]): ManifestRow[] {
  const own = lower(name)
  const rank = ({ file_name }: ManifestRow): number => {
    const named = lower(file_name ?? '')
    if (named === own) return 3
    if (own.endsWith(`/${named}`)) return 2
    return named.endsWith(`/${own}`) ? 1 : 0
  }
  const best = Math.max(...rowsOfBase.map(rank), 0)
  return rowsOfBase.filter((row) => rank(row) === best)
}

/** Manifest first, then the name pattern. Of several lines for one file the newest that tells something stands. */
export function matchName(
  name: string,
  matcher: NameMatcher,
  rowsOfBase: readonly ManifestRow[],
  bands: readonly string[],
): NameMatch {
  const rows = rowsOfFile(name, rowsOfBase).toSorted((a, b) => b.id - a.id)
  const byPattern = matcher.match(name)
  const candidate = rows.find((row) => row.candidate !== null)?.candidate ?? byPattern?.candidate ?? null
  // A line for each band of one file tells no single band: then the file's extensions do.
  const said = [...new Set(rows.flatMap((row) => row.band ?? []))]
  if (said.length === 1) {
    const band = sameBand(said[0], bands) ?? bandOfFilter(said[0], bands)
    if (band !== null) return { candidate, band, refusal: null, rows }
    const line = rows.find((row) => row.band !== null)?.line ?? 0
    return { candidate, band, refusal: foreignBand(name, said[0], line, bands), rows }
  }
  return { candidate, band: said.length > 1 ? null : (byPattern?.band ?? null), refusal: null, rows }
}
