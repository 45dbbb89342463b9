import type { TableColumnName, TableInput } from '@/lib/work/catalogue/table-input'
import { readFilter } from './read-filter'
import { readRegion } from './sky-region'
import { readTableState, type TableShape } from './table-state'

/** By which name the server knows a column; those that it does not are neither sorted nor filtered by. */
export type ListNames = Readonly<Record<string, TableColumnName>>

/** What the address of a table asks the server for. A filter that cannot be read lets everything pass; its field says so. */
export function tableQuery(shape: TableShape, names: ListNames, search: URLSearchParams, pageSize: number): TableInput {
  const { sort, filters, columns, page } = readTableState(shape, search)
  const asked = shape.columns.flatMap(({ id, filter }) => {
    const read = filter && names[id] ? readFilter(filter, filters[id] ?? '') : null
    return read && 'condition' in read ? [{ column: names[id], condition: read.condition }] : []
  })
  const { cone } = readRegion(filters)
  return {
    filter: { columns: asked, ...(cone ? { cone } : {}) },
    order: names[sort[0].id] ?? 'id',
    descending: sort[0].descending,
    page,
    pageSize,
    withAnswers: columns.includes('tags') || columns.includes('remark'),
  }
}
