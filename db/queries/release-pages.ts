import { sql, type Kysely, type SelectQueryBuilder } from 'kysely'
import type { DB } from '../schema'
import type { ReleaseEntry } from '../schema/releases'
import { among } from './by-ids'

export type EntryClass = 'A' | 'B' | 'C' | 'none'

/** What narrows the entries of a release; left out, everything passes. */
export interface EntryConditions {
  /** In the designation, the name, the labels of reference lists or the tags, whatever its case. */
  text?: string
  classes?: readonly EntryClass[]
  /** Whether a reference list knows it. */
  known?: boolean
  ids?: readonly number[]
}

const ORDERS = {
  catalogue: sql`row_number`,
  designation: sql`designation`,
  ra: sql`ra_deg`,
  dec: sql`dec_deg`,
  class: sql`coalesce(class, 'D')`,
  mean: sql`mean`,
  probability: sql`probability`,
  radius: sql`einstein_radius_arcsec`,
}
export type EntryOrder = keyof typeof ORDERS

type Query = SelectQueryBuilder<DB, 'release_entry', object>

/** As the column `new` of a release: no list that is kept out of new lists knows it. */
const isNew = sql<boolean>`not exists
  (select 1 from json_each(known_as) label where label.value ->> 'keptOutOfNew' is not 0)`

function narrowed(db: Kysely<DB>, releaseId: number, { text, classes, known, ids }: EntryConditions): Query {
  let query: Query = db.selectFrom('release_entry').where('release_id', '=', releaseId)
  if (ids) query = query.where('id', 'in', among(ids))
  if (classes) query = query.where(sql<string>`coalesce(class, 'none')`, 'in', classes)
  if (known !== undefined) query = query.where(known ? sql<boolean>`known_as <> '[]'` : isNew)
  if (text) {
    const like = `%${text.replace(/[\\%_]/g, '\\$&')}%`
    query = query.where(
      sql<boolean>`(designation like ${like} escape '\\' or name like ${like} escape '\\'
        or known_as like ${like} escape '\\' or tags like ${like} escape '\\')`,
    )
  }
  return query
}

/** A page of the entries that pass, what has no value last. */
export async function listReleasedPage(
  db: Kysely<DB>,
  releaseId: number,
  conditions: EntryConditions,
  page: { order: EntryOrder; descending: boolean; offset: number; limit: number },
): Promise<ReleaseEntry[]> {
  const order = ORDERS[page.order]
  return narrowed(db, releaseId, conditions)
    .selectAll()
    .orderBy(page.descending ? sql`${order} desc nulls last` : sql`${order} asc nulls last`)
    .orderBy('row_number')
    .limit(page.limit)
    .offset(page.offset)
    .execute()
}

export async function countReleased(db: Kysely<DB>, releaseId: number, conditions: EntryConditions): Promise<number> {
  const { count } = await narrowed(db, releaseId, conditions)
    .select((e) => e.fn.countAll<number>().as('count'))
    .executeTakeFirstOrThrow()
  return count
}

export async function countClasses(db: Kysely<DB>, releaseId: number): Promise<{ class: EntryClass; count: number }[]> {
  return db
    .selectFrom('release_entry')
    .select([sql<EntryClass>`coalesce(class, 'none')`.as('class'), (e) => e.fn.countAll<number>().as('count')])
    .where('release_id', '=', releaseId)
    .groupBy('class')
    .orderBy('class')
    .execute()
}

export interface EntryOnSky {
  rowNumber: number
  key: string
  designation: string
  class: 'A' | 'B' | 'C' | null
  raDeg: number
  decDeg: number
}

/** In the order of the catalogue, after a row. */
export async function listEntriesOnSky(
  db: Kysely<DB>,
  releaseId: number,
  page: { after: number; limit: number },
): Promise<EntryOnSky[]> {
  return db
    .selectFrom('release_entry')
    .select([
      'row_number as rowNumber',
      'entry_key as key',
      'designation',
      'class',
      'ra_deg as raDeg',
      'dec_deg as decDeg',
    ])
    .where('release_id', '=', releaseId)
    .where('row_number', '>', page.after)
    .orderBy('row_number')
    .limit(page.limit)
    .execute()
}

export interface EntryBeside {
  key: string
  designation: string
  rowNumber: number
}

/** The entries of the rows before and after. */
export async function listEntriesBeside(db: Kysely<DB>, releaseId: number, rowNumber: number): Promise<EntryBeside[]> {
  return db
    .selectFrom('release_entry')
    .select(['entry_key as key', 'designation', 'row_number as rowNumber'])
    .where('release_id', '=', releaseId)
    .where('row_number', 'in', [rowNumber - 1, rowNumber + 1])
    .execute()
}

/** Under which key each of these releases has a candidate. */
export async function listEntryInReleases(
  db: Kysely<DB>,
  releaseIds: readonly number[],
  candidateId: number,
): Promise<{ releaseId: number; key: string }[]> {
  return db
    .selectFrom('release_entry')
    .select(['release_id as releaseId', 'entry_key as key'])
    .where('release_id', 'in', among(releaseIds))
    .where('candidate_id', '=', candidateId)
    .execute()
}
