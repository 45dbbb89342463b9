import { act, renderHook } from '@testing-library/react'
import { beforeEach, expect, it, vi } from 'vitest'
import type { TableShape } from './table-state'
import { useTableState } from './use-table-state'

const address = vi.hoisted(() => ({ search: '', push: vi.fn(), replace: vi.fn() }))
vi.mock('next/navigation', () => ({
  useRouter: () => address,
  useSearchParams: () => new URLSearchParams(address.search),
}))

const shape: TableShape = {
  columns: [
    { id: 'name', filter: 'text', sortable: true, pinned: true },
    { id: 'mean', filter: 'range', sortable: true },
  ],
  defaultSort: { id: 'name', descending: false },
}

beforeEach(() => {
  address.search = ''
  address.push.mockReset()
  address.replace.mockReset()
  window.history.replaceState(null, '', '/table')
})

it('goes where the address goes: by the way back, or a link', () => {
  address.search = 'mean=2..3'
  const { result, rerender } = renderHook(() => useTableState(shape))
  expect(result.current.state.filters).toEqual({ mean: '2..3' })
  address.search = ''
  rerender()
  expect(result.current.state.filters).toEqual({})
})

it('is not set back by an address that it asked for before somebody went on', () => {
  const { result, rerender } = renderHook(() => useTableState(shape))
  act(() => result.current.update({ filters: { mean: '2' } }, 'mean'))
  act(() => result.current.update({ filters: { mean: '2..3' } }, 'mean'))
  expect(address.push).toHaveBeenCalledTimes(1)
  expect(address.replace).toHaveBeenCalledWith('/table?mean=2..3', { scroll: false })
  expect(result.current.state.filters).toEqual({ mean: '2..3' })
  address.search = 'mean=2..3'
  rerender()
  expect(result.current.state.filters).toEqual({ mean: '2..3' })
})

it('makes a step of the history of each change but of what is typed on in one field', () => {
  const { result } = renderHook(() => useTableState(shape))
  act(() => result.current.update({ filters: { name: 'S' } }, 'name'))
  act(() => result.current.update({ filters: { name: 'SW' } }, 'name'))
  act(() => result.current.update({ sort: [{ id: 'mean', descending: true }] }))
  act(() => result.current.update({ filters: { name: 'SWS' } }, 'name'))
  expect(address.push.mock.calls.map(([to]) => to)).toEqual([
    '/table?name=S',
    '/table?sort=-mean&name=SW',
    '/table?sort=-mean&name=SWS',
  ])
  expect(address.replace.mock.calls.map(([to]) => to)).toEqual(['/table?name=SW'])
})

it('begins with the first page where other rows are asked for', () => {
  address.search = 'page=4'
  const { result } = renderHook(() => useTableState(shape))
  act(() => result.current.update({ filters: { name: 'S' } }, 'name'))
  expect(address.push).toHaveBeenCalledWith('/table?name=S', { scroll: false })
})
