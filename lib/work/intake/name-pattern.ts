import { DEFAULT_NAME_PATTERN } from '@/lib/work/campaigns/campaign-input'
import { withoutEndings } from './file-name'

/**
 * Reads candidate and band out of file names by the campaign's pattern: `{candidate}`, `{band}`, `{any}` and plain text.
 * Endings do not count. A pattern without a slash looks at the last part of a name, one with slashes at as many folders.
 */
export interface NameMatcher {
  /** As written by the lead, or the default. */
  pattern: string
  tellsBand: boolean
  match(name: string): { candidate: string; band: string | null } | null
}

const escape = (text: string): string => text.replace(/[.*+?^${}()|[\]\\/]/g, '\\$&')

/** @param bands of the campaign; the longest is tried first, so that `SWS1_Ks` is not band s of `SWS1_K`. */
export function nameMatcher(namePattern: string | null, bands: readonly string[]): NameMatcher {
  const pattern = namePattern ?? DEFAULT_NAME_PATTERN
  const text = withoutEndings(pattern)
  const anyBand = bands
    .toSorted((a, b) => b.length - a.length)
    .map(escape)
    .join('|')
  // The first {candidate} and {band} are taken; a second one must repeat it.
  const seen = new Set<string>()
  const source = text
    .split(/(\{candidate\}|\{band\}|\{any\})/)
    .map((part) => {
      if (part === '{any}') return '.*?'
      if (part !== '{candidate}' && part !== '{band}') return escape(part)
      const group = part.slice(1, -1)
      if (seen.has(group)) return `\\k<${group}>`
      seen.add(group)
      return group === 'band' ? `(?<band>${anyBand})` : text.includes('/') ? '(?<candidate>[^/]+)' : '(?<candidate>.+)'
    })
    .join('')
  // Exact case first: a campaign may have both r and R.
  const expressions = ['', 'i'].map((flags) => new RegExp(`^${source}$`, flags))
  const folders = text.split('/').length
  return {
    pattern,
    tellsBand: seen.has('band'),
    match(name) {
      const subject = withoutEndings(name).split('/').slice(-folders).join('/')
      for (const expression of expressions) {
        const groups = expression.exec(subject)?.groups
        const candidate = groups?.candidate?.trim()
        if (candidate) return { candidate, band: sameBand(groups?.band, bands) }
      }
      return null
    },
  }
}

/** The campaign's own spelling of a band, exact case before any case; null where it is none of them. */
export function sameBand(text: string | undefined, bands: readonly string[]): string | null {
  if (text === undefined) return null
  const wanted = text.trim()
  return (
    bands.find((band) => band === wanted) ?? bands.find((band) => band.toLowerCase() === wanted.toLowerCase()) ?? null
  )
}
