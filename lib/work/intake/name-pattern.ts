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

/** Of a name with its pattern's {candidate} or {band} written twice, where each place can depend on every other. */
const MOST_STEPS = 20_000

type Part =
  | { kind: 'text'; text: string }
  | { kind: 'any' | 'candidate' | 'band' }
  /** Repeats what the first {candidate} or {band} stood for. */
  | { kind: 'same'; of: 'candidate' | 'band' }

function partsOf(text: string): Part[] {
  const seen = new Set<string>()
  return text.split(/(\{candidate\}|\{band\}|\{any\})/).flatMap((piece): Part[] => {
    if (piece === '') return []
    if (piece === '{any}') return [{ kind: 'any' }]
    if (piece !== '{candidate}' && piece !== '{band}') return [{ kind: 'text', text: piece }]
    const kind = piece === '{band}' ? 'band' : 'candidate'
    if (seen.has(kind)) return [{ kind: 'same', of: kind }]
    seen.add(kind)
    return [{ kind }]
  })
}

/** @param bands of the campaign; the longest is tried first, so that `SWS1_Ks` is not band s of `SWS1_K`. */
export function nameMatcher(namePattern: string | null, bands: readonly string[]): NameMatcher {
  const pattern = namePattern ?? DEFAULT_NAME_PATTERN
  const text = withoutEndings(pattern)
  const parts = partsOf(text)
  const longestFirst = bands.toSorted((a, b) => b.length - a.length)
  const folders = text.split('/').length
  return {
    pattern,
    tellsBand: parts.some(({ kind }) => kind === 'band'),
    match(name) {
      const subject = withoutEndings(name).split('/').slice(-folders).join('/')
      // Exact case first: a campaign may have both r and R.
      for (const anyCase of [false, true]) {
        const found = new Attempt(parts, longestFirst, subject, anyCase).run()
        const candidate = found?.candidate?.trim()
        if (candidate) return { candidate, band: sameBand(found?.band, bands) }
      }
      return null
    },
  }
}

interface Found {
  candidate?: string
  band?: string
}

/**
 * One name tried against a pattern: {any} as short as may be, {candidate} as long as may be. A place in the pattern and the
 * name that failed once is not tried again, so the work is at most parts times the square of the name's length.
 */
class Attempt {
  readonly #failed = new Set<number>()
  readonly #repeats: boolean
  readonly #inFolders: boolean
  readonly #text: string
  #steps = 0
  constructor(
    private readonly parts: readonly Part[],
    private readonly bands: readonly string[],
    private readonly subject: string,
    private readonly anyCase: boolean,
  ) {
    this.#repeats = parts.some(({ kind }) => kind === 'same')
    this.#inFolders = parts.some((part) => part.kind === 'text' && part.text.includes('/'))
    this.#text = this.#plain(subject)
  }

  run(): Found | null {
    return this.#from(0, 0, {})
  }

  #plain(text: string): string {
    // Letter by letter, so that no letter becomes two and places stay where they are.
    return this.anyCase
      ? text.replace(/\p{Lu}/gu, (letter) =>
          letter.toLowerCase().length === letter.length ? letter.toLowerCase() : letter,
        )
      : text
  }

  #from(part: number, at: number, found: Found): Found | null {
    if (part === this.parts.length) return at === this.subject.length ? found : null
    const place = part * (this.subject.length + 1) + at
    // What comes after a repeated part depends on what it repeats, so there the steps are counted instead.
    if (this.#repeats ? ++this.#steps > MOST_STEPS : this.#failed.has(place)) return null
    const result = this.#try(part, at, found)
    if (result === null && !this.#repeats) this.#failed.add(place)
    return result
  }

  #try(index: number, at: number, found: Found): Found | null {
    const part = this.parts[index]
    if (part.kind === 'any') return this.#short(index, at, found)
    if (part.kind === 'candidate') return this.#long(index, at, found)
    const texts = part.kind === 'text' ? [part.text] : part.kind === 'same' ? [found[part.of] ?? ''] : this.bands
    for (const text of texts) {
      if (!this.#text.startsWith(this.#plain(text), at)) continue
      const end = at + text.length
      const told = part.kind === 'band' ? { ...found, band: this.subject.slice(at, end) } : found
      const result = this.#from(index + 1, end, told)
      if (result) return result
    }
    return null
  }

  #short(index: number, at: number, found: Found): Found | null {
    for (let end = at; end <= this.subject.length; end++) {
      const result = this.#from(index + 1, end, found)
      if (result) return result
    }
    return null
  }

  #long(index: number, at: number, found: Found): Found | null {
    const slash = this.#inFolders ? this.subject.indexOf('/', at) : -1
    for (let end = slash < 0 ? this.subject.length : slash; end > at; end--) {
      const result = this.#from(index + 1, end, { ...found, candidate: this.subject.slice(at, end) })
      if (result) return result
    }
    return null
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
