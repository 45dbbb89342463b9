import type { TableQuery } from '@/lib/work/releases/table-query'

/** What the address keeps of a table's query: only what is not as it comes. */
function kept(query: TableQuery): URLSearchParams {
  const parameters = new URLSearchParams()
  if (query.text) parameters.set('q', query.text)
  if (query.classes.length) parameters.set('class', query.classes.join(','))
  if (query.known) parameters.set('known', query.known)
  if (query.nearText) parameters.set('near', query.nearText)
  if (query.radiusText) parameters.set('radius', query.radiusText)
  return parameters
}

const sorted = (order: TableQuery['order'], descending: boolean) => (descending ? `-${order}` : order)

/** The same entries in another order, from the first page. */
export function orderParameters(query: TableQuery, order: TableQuery['order'], descending: boolean): URLSearchParams {
  const parameters = kept(query)
  parameters.set('sort', sorted(order, descending))
  return parameters
}

/** Another page of the same. */
export function pageParameters(query: TableQuery, page: number): URLSearchParams {
  const parameters = kept(query)
  if (query.order !== 'catalogue' || query.descending) parameters.set('sort', sorted(query.order, query.descending))
  if (page > 1) parameters.set('page', String(page))
  return parameters
}

export const isNarrowed = (query: TableQuery): boolean => kept(query).size > 0
