import { z } from 'zod'
import type { ListMapping } from '@/db/schema/matching'
import { guessPositionColumns, type ColumnSaying } from '@/lib/science/sky/guess-columns'
import { saidFrame } from './said-frame'

/** A column of a list's file: its name, made unique, and what the file says of it. */
export interface ListColumn extends ColumnSaying {
  name: string
  /** The first value that is not empty. */
  sample: string
}

const Column = z.string().min(1).max(500)
const Unit = z.enum(['deg', 'hour', 'rad', 'text'])
export const MOST_KEPT_COLUMNS = 30

/** Which columns hold what, as a lead has chosen. */
export const MappingInput = z.strictObject({
  ra: z.string().min(1, 'Choose the column of the right ascension.').max(500),
  dec: z.string().min(1, 'Choose the column of the declination.').max(500),
  raUnit: Unit,
  decUnit: Unit,
  frame: z.enum(['ICRS', 'FK5', 'GALACTIC']),
  name: Column.nullable(),
  redshift: Column.nullable(),
  more: z.array(Column).max(MOST_KEPT_COLUMNS, `Keep at most ${MOST_KEPT_COLUMNS} further columns.`),
  allTheSame: z.boolean(),
})

/** The choice as a form carries it, JSON in one field. @throws ZodError, also where it is no JSON */
export function parseMappingField(value: unknown): ListMapping {
  const text = typeof value === 'string' ? value : ''
  return MappingInput.parse(z.string().transform(parseJson).parse(text))
}

function parseJson(text: string, context: z.RefinementCtx): unknown {
  try {
    return JSON.parse(text) as unknown
  } catch {
    context.addIssue({
      code: 'custom',
      path: ['mapping'],
      message: 'Choose the columns again: the choice did not arrive.',
    })
    return z.NEVER
  }
}

const NAMES = [
  /^(name|designation|id|object|objid|source_?id|lens_?name|system(_name)?|main_id|identifier)$/i,
  /name|desig/i,
  /id$/i,
]
const REDSHIFTS = [/^(z|z_?lens|z_?l|redshift|z_?spec|zspec|lens_?redshift)$/i, /redshift|^z_?(phot|best|spec)/i]
const NAME_UCD = /^meta\.id/i
const REDSHIFT_UCD = /^src\.redshift/i
const LONGITUDE = [/^(l|glon|gal_?lon|gal_?l)$/i, /^pos\.galactic\.lon/i] as const
const LATITUDE = [/^(b|glat|gal_?lat|gal_?b)$/i, /^pos\.galactic\.lat/i] as const
const GUESSED_MORE = 6

/** What the columns look like; what nobody can tell is empty, for a lead to choose. And what a person should look at. */
export function guessMapping(columns: readonly ListColumn[]): { mapping: ListMapping; warnings: string[] } {
  const { ra, dec, warnings } = guessPositionColumns(columns)
  const galactic = ra === null && dec === null ? galacticOf(columns) : null
  const place = galactic ?? { ra: nameAt(columns, ra?.column), dec: nameAt(columns, dec?.column) }
  const taken = (name: string) => name === place.ra || name === place.dec
  const free = columns.filter(({ name }) => !taken(name))
  const name = find(free, NAMES, NAME_UCD)
  const redshift = find(
    free.filter((column) => column.name !== name),
    REDSHIFTS,
    REDSHIFT_UCD,
  )
  const more = free.map((column) => column.name).filter((one) => one !== name && one !== redshift)
  const mapping: ListMapping = {
    ...place,
    raUnit: unitOf(columns, place.ra, ra?.unit),
    decUnit: unitOf(columns, place.dec, dec?.unit),
    frame: galactic ? 'GALACTIC' : frameOf(columns.find((column) => column.name === place.ra)?.frame),
    name,
    redshift,
    more: more.slice(0, GUESSED_MORE),
    allTheSame: false,
  }
  return { mapping, warnings: galactic ? ['The columns look galactic; see whether that is so.'] : warnings }
}

const nameAt = (columns: readonly ListColumn[], place: number | undefined) =>
  place === undefined ? '' : columns[place].name

function galacticOf(columns: readonly ListColumn[]): { ra: string; dec: string } | null {
  const one = ([name, ucd]: readonly [RegExp, RegExp]) =>
    columns.find((column) => ucd.test(column.ucd ?? '')) ?? columns.find((column) => name.test(column.name))
  const [lon, lat] = [one(LONGITUDE), one(LATITUDE)]
  return lon && lat ? { ra: lon.name, dec: lat.name } : null
}

function find(columns: readonly ListColumn[], names: readonly RegExp[], ucd: RegExp): string | null {
  const said = columns.find((column) => ucd.test(column.ucd ?? ''))
  if (said) return said.name
  for (const pattern of names) {
    const named = columns.find(({ name }) => pattern.test(name.trim()))
    if (named) return named.name
  }
  return null
}

/** Values such as 12:30:49 are sexagesimal whatever their column is called. */
function unitOf(columns: readonly ListColumn[], name: string, guessed: ListMapping['raUnit'] = 'deg') {
  const sample = columns.find((column) => column.name === name)?.sample ?? ''
  return /^\s*[+\-−]?\d+\s*[:hd°\s]\s*\d+/.test(sample) ? 'text' : guessed
}

const frameOf = (said: string | null | undefined): ListMapping['frame'] => {
  const { kind } = saidFrame(said)
  return kind === 'FK5' || kind === 'GALACTIC' ? kind : 'ICRS'
}
