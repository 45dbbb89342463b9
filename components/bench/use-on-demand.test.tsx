import { renderHook, waitFor } from '@testing-library/react'
import { afterEach, expect, it, vi } from 'vitest'
import { useOnDemand } from './use-on-demand'

afterEach(() => void vi.useRealTimers())

const Part = () => null

it('fetches a part when it is wanted, and in a quiet moment when it is not', async () => {
  const wantedNow = vi.fn(async () => Part)
  const { result } = renderHook(() => useOnDemand(wantedNow, true))
  await waitFor(() => expect(result.current).toBe(Part))
  vi.useFakeTimers()
  const later = vi.fn(async () => Part)
  renderHook(() => useOnDemand(later, false))
  expect(later).not.toHaveBeenCalled()
  vi.advanceTimersByTime(2000)
  expect(later).toHaveBeenCalledOnce()
})

it('does without a part that does not come, and tries again when it is wanted again', async () => {
  const load = vi.fn<() => Promise<typeof Part>>().mockRejectedValueOnce(new Error('offline')).mockResolvedValue(Part)
  const { result, rerender } = renderHook(({ wanted }) => useOnDemand(load, wanted), { initialProps: { wanted: true } })
  await waitFor(() => expect(load).toHaveBeenCalledOnce())
  expect(result.current).toBeNull()
  rerender({ wanted: false })
  rerender({ wanted: true })
  await waitFor(() => expect(result.current).toBe(Part))
})
