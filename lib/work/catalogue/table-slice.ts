import 'server-only'
import type { Kysely } from 'kysely'
import type { CandidateScope } from '@/db/queries/catalogue'
import {
  countListed,
  isFiltered,
  listFiltered,
  listMeasuredIds,
  listSlice,
  type ListedTable,
  type ListFilter,
  type ListSlice,
} from '@/db/queries/listing'
import type { ColumnCondition } from '@/db/queries/list-conditions'
import type { ListColumnName } from '@/db/queries/list-columns'
import type { DB } from '@/db/schema'
import { standingMeasurements } from '@/lib/work/measuring/standing-measurements'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { STAGES, type TableFilter, type TableInput } from './table-input'

export interface TableSlice {
  ids: number[]
  /** On all pages. */
  count: number
}

/** Einstein radii are combined of several people's measurements, which SQL does not do: so they are found here, by candidate. */
type Radii = ReadonlyMap<number, number>

/** What the database is asked of a filter; a filter by Einstein radius becomes a list of ids. */
export function listFilter({ states = [], columns = [], ...rest }: TableFilter, radii: Radii): ListFilter {
  const asked: { column: ListColumnName; condition: ColumnCondition }[] = []
  let filter: ListFilter = { ...rest, stages: states.map((state) => STAGES.indexOf(state)), columns: asked }
  for (const { column, condition } of columns) {
    if (column !== 'einstein') asked.push({ column, condition })
    else if (condition.kind === 'missing') filter = { ...filter, notAmong: [...radii.keys()] }
    else filter = { ...filter, among: [...radii].flatMap(([id, radius]) => (isMet(condition, radius) ? [id] : [])) }
  }
  return filter
}

function isMet(condition: ColumnCondition, radius: number): boolean {
  if (condition.kind !== 'range') return true
  const { least, most, above, below } = condition
  const fromBelow = least === null || (above ? radius > Number(least) : radius >= Number(least))
  return fromBelow && (most === null || (below ? radius < Number(most) : radius <= Number(most)))
}

/** Only where the table asks for them, of every candidate whose measurement the person may learn. */
export async function radiiFor(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  { filter, order }: Pick<TableInput, 'filter' | 'order'>,
): Promise<Radii> {
  if (order !== 'einstein' && !filter.columns?.some(({ column }) => column === 'einstein')) return new Map()
  const standing = await standingMeasurements(db, permit, await listMeasuredIds(db, permit.campaign.id))
  return new Map([...standing].map(([id, { einsteinRadiusArcsec }]) => [id, einsteinRadiusArcsec]))
}

export async function tableSlice(
  db: Kysely<DB>,
  scope: CandidateScope,
  table: ListedTable,
  input: Pick<TableInput, 'order' | 'descending' | 'page' | 'pageSize'> & {
    filter: ListFilter
    radii: Radii
    /** Rows without any filter. */
    all: number
  },
): Promise<TableSlice> {
  const { filter, order, descending, page, pageSize, radii, all } = input
  const offset = page * pageSize
  const column = order === 'id' || order === 'einstein' ? null : order
  const slice = { filter, order: { column, descending }, offset, limit: pageSize }
  if (order !== 'einstein' && isFiltered(filter)) {
    const { ids, count } = await listFiltered(db, scope, table, slice)
    return { ids, count: count ?? (offset === 0 ? 0 : await countListed(db, scope, table, filter)) }
  }
  const ids =
    order === 'einstein' ? await byRadius(db, scope, table, slice, radii) : await listSlice(db, scope, table, slice)
  const isWhole = ids.length < pageSize && (ids.length > 0 || offset === 0)
  if (isWhole) return { ids, count: offset + ids.length }
  return { ids, count: isFiltered(filter) ? await countListed(db, scope, table, filter) : all }
}

/** Measured ones first, by radius; the rest by arrival. */
async function byRadius(
  db: Kysely<DB>,
  scope: CandidateScope,
  table: ListedTable,
  { filter, order, offset, limit }: ListSlice,
  radii: Radii,
): Promise<number[]> {
  const known = [...radii.keys()]
  const wanted = filter.among ? known.filter((id) => filter.among?.includes(id)) : known
  const measured = await listSlice(db, scope, table, {
    filter: { ...filter, among: wanted },
    order: { column: null, descending: order.descending },
    offset: 0,
    limit: known.length,
  })
  const sign = order.descending ? -1 : 1
  const sorted = measured.toSorted((a, b) => sign * ((radii.get(a) ?? 0) - (radii.get(b) ?? 0)))
  const ids = sorted.slice(offset, offset + limit)
  if (ids.length === limit || filter.among) return ids
  const others = await listSlice(db, scope, table, {
    filter: { ...filter, without: known },
    order: { column: null, descending: order.descending },
    offset: Math.max(0, offset - sorted.length),
    limit: limit - ids.length,
  })
  return [...ids, ...others]
}
