import '@testing-library/jest-dom/vitest'
import { cleanup } from '@testing-library/react'
import { afterEach, beforeEach, expect, vi, type MockInstance } from 'vitest'

let spy: MockInstance<typeof console.error>
beforeEach(() => {
  spy = vi.spyOn(console, 'error')
})
afterEach(() => {
  cleanup()
  const calls = spy.mock.calls
  spy.mockRestore()
  expect(calls, 'console.error was called').toEqual([])
})
