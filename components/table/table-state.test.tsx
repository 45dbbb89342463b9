import { describe, expect, it } from 'vitest'
import { readTableState, writeTableState, type TableShape } from './table-state'

const shape: TableShape = {
  columns: [
    { id: 'designation', filter: 'text', sortable: true, pinned: true },
    { id: 'class', filter: ['A', 'B', 'C'], sortable: true },
    { id: 'mean', filter: 'range', sortable: true },
    { id: 'votes' },
    { id: 'tags', filter: 'text', hidden: true },
    { id: 'calibration', filter: ['yes'], filterOnly: true },
  ],
  defaultSort: { id: 'mean', descending: true },
  hasRegion: true,
}
const plain = { sort: [{ id: 'mean', descending: true }], filters: {}, columns: ['class', 'mean', 'votes'], page: 0 }

describe('the state of a table in its address', () => {
  it('is empty for a table as it comes', () => {
    expect(readTableState(shape, '')).toEqual(plain)
    expect(writeTableState(shape, plain)).toBe('')
  })

  it('survives the way into the address and back', () => {
    const state = {
      sort: [
        { id: 'class', descending: false },
        { id: 'mean', descending: true },
      ],
      filters: { designation: 'J00 & +1=2,', class: 'A,B', mean: '>2.2', near: '10:00:24 +2:12', within: '30"' },
      columns: ['tags', 'mean'],
      page: 4,
    }
    expect(readTableState(shape, writeTableState(shape, state))).toEqual(state)
  })

  it('can be read by people', () => {
    const state = { ...plain, filters: { mean: '2..3', class: 'A,B' }, page: 1 }
    expect(writeTableState(shape, state)).toBe('class=A,B&mean=2..3&page=2')
  })

  it('keeps the columns in the order of the address, each once, and shows none that is only a filter', () => {
    expect(readTableState(shape, 'columns=votes,class,votes,calibration,nothing').columns).toEqual(['votes', 'class'])
  })

  it('knows no region where rows have no place', () => {
    const { hasRegion: _hasRegion, ...placeless } = shape
    expect(readTableState(placeless, 'near=150+2&within=1')).toEqual(plain)
  })

  it('can hide every column but the pinned one', () => {
    expect(readTableState(shape, writeTableState(shape, { ...plain, columns: [] })).columns).toEqual([])
  })

  it.each(['sort=votes', 'sort=-nothing,,', 'page=-1', 'page=x', 'votes=A', 'unknown=1', 'mean=+'])(
    'passes over what does not fit the table: %s',
    (search) => {
      expect(readTableState(shape, search)).toEqual(plain)
    },
  )
})
