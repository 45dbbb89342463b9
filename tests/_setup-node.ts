import { afterEach, beforeEach, expect, vi, type MockInstance } from 'vitest'

// An unexpected console.error is a failure: code under test must report through its return value or its log.
let spy: MockInstance<typeof console.error>
beforeEach(() => {
  spy = vi.spyOn(console, 'error')
})
afterEach(() => {
  const calls = spy.mock.calls
  spy.mockRestore()
  expect(calls, 'console.error was called').toEqual([])
})
