import type { ManifestEntry, ParsedManifest } from './parse-manifest'

/**
 * A parsed manifest on its way between threads: its lines as JSON in parts, because objects are made again in one go when they
 * arrive, and 100,000 of them keep every request waiting.
 */
export interface PackedManifest extends Omit<ParsedManifest, 'entries'> {
  parts: string[]
  lines: number
  /** Some lines name both a file and its candidate. */
  namesFiles: boolean
}

const LINES_PER_PART = 250

export function packManifest({ entries, ...rest }: ParsedManifest): PackedManifest {
  const parts: string[] = []
  for (let start = 0; start < entries.length; start += LINES_PER_PART) {
    parts.push(JSON.stringify(entries.slice(start, start + LINES_PER_PART)))
  }
  const namesFiles = entries.some(({ candidate, fileName }) => candidate !== null && fileName !== null)
  return { ...rest, parts, lines: entries.length, namesFiles }
}

export const unpackPart = (part: string): ManifestEntry[] => JSON.parse(part) as ManifestEntry[]
