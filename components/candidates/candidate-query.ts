import { chosenOf, readTableState, type TableShape } from '@/components/table/table-state'
import type { CandidateState } from '@/db/schema/intake'
import type { CandidateTableInput } from '@/lib/work/catalogue/candidate-table'
import { CANDIDATE_COLUMNS, CANDIDATE_SORT, NOT_SENT_ON, UNGRADED, type ColumnsFor } from './candidate-columns'

const ORDERS: Readonly<Record<string, CandidateTableInput['order']>> = {
  name: 'name',
  state: 'state',
  mean: 'mean',
  spread: 'spread',
  probability: 'probability',
  score: 'score',
  ra: 'raDeg',
  dec: 'decDeg',
}

/** What the address of the table of candidates asks the server for. */
export function candidateQuery(role: ColumnsFor, search: URLSearchParams, pageSize: number): CandidateTableInput {
  const shape: TableShape = { columns: CANDIDATE_COLUMNS[role], defaultSort: CANDIDATE_SORT }
  const { sort, filters, page } = readTableState(shape, search)
  const choices = shape.columns.find((column) => column.id === 'state')?.filter ?? []
  const chosen = chosenOf(filters.state).filter((state) => choices.includes(state))
  const states = chosen.filter((state) => state !== UNGRADED && state !== NOT_SENT_ON) as CandidateState[]
  return {
    filter: {
      name: filters.name?.trim(),
      states,
      withheld: chosen.includes(UNGRADED),
      notSentOn: chosen.includes(NOT_SENT_ON),
    },
    order: ORDERS[sort[0].id] ?? 'name',
    descending: sort[0].descending,
    page,
    pageSize,
  }
}
