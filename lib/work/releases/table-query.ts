import type { EntryClass, EntryOrder } from '@/db/queries/release-pages'
import { CoordinateError, parseDeclination, parseRightAscension } from '@/lib/science/sky/coordinates'

/** What the address of a release's page asks of its table. What cannot be read is told, and passed over. */
export interface TableQuery {
  order: EntryOrder
  descending: boolean
  /** From 1. */
  page: number
  text: string
  classes: EntryClass[]
  known: 'yes' | 'no' | ''
  near: { raDeg: number; decDeg: number; radiusDeg: number } | null
  /** As it was typed. */
  nearText: string
  radiusText: string
  problems: string[]
}

export type Asked = Record<string, string | string[] | undefined>

export const ENTRY_CLASSES: readonly EntryClass[] = ['A', 'B', 'C', 'none']
const ORDERS: readonly EntryOrder[] = [
  'catalogue',
  'designation',
  'ra',
  'dec',
  'class',
  'mean',
  'probability',
  'radius',
]
const LONGEST_TEXT = 200
const USUAL_RADIUS_ARCMIN = 10

export function readTableQuery(asked: Asked): TableQuery {
  const problems: string[] = []
  const one = (name: string): string => {
    const value = asked[name]
    return (Array.isArray(value) ? value[0] : (value ?? '')).trim()
  }
  const all = (name: string): string[] => [asked[name] ?? []].flat().flatMap((value) => value.split(','))

  const sort = one('sort')
  const name = sort.replace(/^-/, '') || 'catalogue'
  const order = ORDERS.find((known) => known === name)
  if (!order) problems.push(`The table cannot be sorted by '${cut(name)}'. It is in the order of the catalogue.`)

  const pageText = one('page')
  const isPage = /^[1-9]\d{0,6}$/.test(pageText)
  if (pageText && !isPage) problems.push(`'${cut(pageText)}' is no page. This is the first.`)

  const typed = all('class').filter(Boolean)
  const classes = ENTRY_CLASSES.filter((known) => typed.includes(known))
  const odd = typed.find((value) => !classes.includes(value as EntryClass))
  if (odd !== undefined) problems.push(`'${cut(odd)}' is no class. There are A, B, C and none.`)

  const known = one('known')
  const isKnown = known === 'yes' || known === 'no'
  if (known && !isKnown) problems.push(`'Known' is yes or no, not '${cut(known)}'.`)

  const text = one('q')
  if (text.length > LONGEST_TEXT) problems.push(`Only the first ${LONGEST_TEXT} characters are looked for.`)

  const nearText = one('near')
  const radiusText = one('radius')
  return {
    order: order ?? 'catalogue',
    descending: order !== undefined && sort.startsWith('-'),
    page: isPage ? Number(pageText) : 1,
    text: text.slice(0, LONGEST_TEXT),
    classes,
    known: isKnown ? known : '',
    near: readNear(nearText, radiusText, problems),
    nearText,
    radiusText,
    problems,
  }
}

/** `150.1 2.2`, `10:00:24 +02:12:00` or `10 00 24 +02 12 00`, with a comma or not; the radius in arcminutes. */
function readNear(nearText: string, radiusText: string, problems: string[]): TableQuery['near'] {
  if (nearText === '') {
    if (radiusText !== '') problems.push('A radius needs a position to be round.')
    return null
  }
  const radius = radiusText === '' ? USUAL_RADIUS_ARCMIN : Number(radiusText)
  if (!(radius > 0 && radius <= 10_800)) {
    problems.push(`The radius '${cut(radiusText)}' is no number of arcminutes between 0 and 10800.`)
    return null
  }
  try {
    const [ra, dec] = splitPosition(nearText)
    return { raDeg: parseRightAscension(ra), decDeg: parseDeclination(dec), radiusDeg: radius / 60 }
  } catch (error) {
    if (!(error instanceof CoordinateError)) throw error
    problems.push(error.message)
    return null
  }
}

function splitPosition(text: string): [string, string] {
  const byComma = text.split(',').map((part) => part.trim())
  if (byComma.length === 2) return [byComma[0], byComma[1]]
  const words = text.replace(/([+−-])\s+/g, '$1').split(/\s+/)
  if (words.length >= 2 && words.length % 2 === 0) {
    const half = words.length / 2
    return [words.slice(0, half).join(' '), words.slice(half).join(' ')]
  }
  throw new CoordinateError(
    `The position '${cut(text)}' cannot be read; write right ascension and declination, like 150.1 2.2 or 10:00:24 +02:12:00.`,
  )
}

const cut = (text: string): string => (text.length > 40 ? `${text.slice(0, 40)}…` : text)
