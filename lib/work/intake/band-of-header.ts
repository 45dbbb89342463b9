import type { FitsHeader } from '@/lib/science/fits/fits-types'
import { sameBand } from './name-pattern'

/** Keywords that name the filter, the likeliest first. Common practice of surveys and observatories, no one source. */
const FILTER_KEYWORDS = [
  'FILTER',
  'BAND',
  'FILTNAM',
  'FILTNAM1',
  'FILTNAME',
  'FILT_ID',
  'FILTER1',
  'FILTER2',
  'FILTERS',
]

/**
 * The campaign's band that a filter's name means: `g.MP9401` and `r DECam SDSS c0002 6415.0 1480.0` by the word in it,
 * `HSC-R2` by that word without its version digit, `F814W` as a whole. null where no band or more than one is named.
 */
export function bandOfFilter(text: string, bands: readonly string[]): string | null {
  const whole = sameBand(text, bands)
  if (whole !== null) return whole
  const words = text.split(/[^A-Za-z0-9+]+/).filter(Boolean)
  const named = (parts: string[]) => new Set(parts.flatMap((part) => sameBand(part, bands) ?? []))
  for (const parts of [words, words.map((word) => word.replace(/^([A-Za-z]+)\d$/, '$1'))]) {
    const found = named(parts)
    if (found.size === 1) return [...found][0]
    if (found.size > 1) return null
  }
  return null
}

/** What a header says of its filter: the band, or null with the texts that name none, for the sentence of a refusal. */
export function bandOfHeader(header: FitsHeader, bands: readonly string[]): { band: string | null; said: string[] } {
  const said: string[] = []
  for (const keyword of FILTER_KEYWORDS) {
    const value = header[keyword]
    if (typeof value !== 'string' || value.trim() === '') continue
    const band = bandOfFilter(value, bands)
    if (band !== null) return { band, said }
    said.push(`${keyword} = '${value.trim()}'`)
  }
  return { band: null, said }
}

/** The bands of the planes of a cube from BANDS ('g,r,i'), or FILTER1, FILTER2 …, or BAND1, BAND2 …; null where not all told. */
export function bandsOfCube(header: FitsHeader, count: number, bands: readonly string[]): string[] | null {
  const lists: (string | null)[][] = []
  for (const keyword of ['BANDS', 'FILTERS']) {
    const text = header[keyword]
    if (typeof text === 'string') {
      const words = text.split(/[\s,;/|]+/).filter(Boolean)
      lists.push((words.length === 1 && count > 1 ? [...words[0]] : words).map((word) => bandOfFilter(word, bands)))
    }
  }
  for (const keyword of ['FILTER', 'BAND', 'FILT', 'BAND_']) {
    const list = Array.from({ length: count }, (_, plane) => header[`${keyword}${plane + 1}`])
    lists.push(list.map((value) => (typeof value === 'string' ? bandOfFilter(value, bands) : null)))
  }
  const told = lists.find((list) => list.length === count && !list.includes(null) && new Set(list).size === count)
  return (told as string[] | undefined) ?? null
}
