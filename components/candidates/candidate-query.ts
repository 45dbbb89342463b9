import { tableQuery, type ListNames } from '@/components/table/table-query'
import { chosenOf, readTableState, type TableShape } from '@/components/table/table-state'
import type { CandidateState } from '@/db/schema/intake'
import type { TableInput } from '@/lib/work/catalogue/table-input'
import { CANDIDATE_COLUMNS, CANDIDATE_SORT, NOT_SENT_ON, UNGRADED, type ColumnsFor } from './candidate-columns'

/** The state is sorted by name alone: its filter has words of its own. */
const NAMES: ListNames = {
  name: 'name',
  votes: 'grades',
  mean: 'mean',
  spread: 'spread',
  probability: 'probability',
  score: 'score',
  ra: 'ra',
  dec: 'dec',
  radeg: 'ra',
  decdeg: 'dec',
  designation: 'designation',
  tags: 'tags',
  remark: 'remark',
  known: 'known',
  einstein: 'einstein',
  decided: 'decided',
  entered: 'entered',
  zlens: 'zlens',
  zsource: 'zsource',
  calibration: 'calibration',
}

/** What the address of the table of candidates asks the server for. */
export function candidateQuery(role: ColumnsFor, search: URLSearchParams, pageSize: number): TableInput {
  const shape: TableShape = { columns: CANDIDATE_COLUMNS[role], defaultSort: CANDIDATE_SORT, hasRegion: true }
  const { sort, filters } = readTableState(shape, search)
  const query = tableQuery(shape, NAMES, search, pageSize)
  const choices = shape.columns.find((column) => column.id === 'state')?.filter ?? []
  const chosen = chosenOf(filters.state).filter((state) => choices.includes(state))
  return {
    ...query,
    order: sort[0].id === 'state' ? 'state' : query.order,
    filter: {
      ...query.filter,
      states: chosen.filter((state) => state !== UNGRADED && state !== NOT_SENT_ON) as CandidateState[],
      withheld: chosen.includes(UNGRADED),
      notSentOn: chosen.includes(NOT_SENT_ON),
    },
  }
}
