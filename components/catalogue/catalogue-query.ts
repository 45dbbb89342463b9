import { tableQuery, type ListNames } from '@/components/table/table-query'
import type { TableInput } from '@/lib/work/catalogue/table-input'
import { CATALOGUE_COLUMNS, CATALOGUE_SORT } from './catalogue-columns'

const NAMES: ListNames = {
  designation: 'designation',
  class: 'class',
  mean: 'mean',
  spread: 'spread',
  probability: 'probability',
  n: 'grades',
  decided: 'decided',
  entered: 'entered',
  ra: 'ra',
  dec: 'dec',
  radeg: 'ra',
  decdeg: 'dec',
  name: 'name',
  cannot: 'cannot',
  tags: 'tags',
  remark: 'remark',
  known: 'known',
  einstein: 'einstein',
  zlens: 'zlens',
  zsource: 'zsource',
}

/** What the address of the catalogue's table asks the server for. */
export function catalogueQuery(search: URLSearchParams, pageSize: number): TableInput {
  const shape = { columns: CATALOGUE_COLUMNS, defaultSort: CATALOGUE_SORT, hasRegion: true }
  return tableQuery(shape, NAMES, search, pageSize)
}
