import { afterEach, expect, it, vi } from 'vitest'
import { exclusively } from './exclusively'

afterEach(() => void Reflect.deleteProperty(navigator, 'locks'))

/** Two pieces of work and the order in which they began and ended. */
async function twoAtOnce(): Promise<string[]> {
  const order: string[] = []
  const work = (name: string) => async () => {
    order.push(`${name} begins`)
    await new Promise((resolve) => setTimeout(resolve, 5))
    order.push(`${name} ends`)
  }
  await Promise.all([exclusively('x', work('one')), exclusively('x', work('two'))])
  return order
}
const IN_TURN = ['one begins', 'one ends', 'two begins', 'two ends']

function giveLocks(request: (name: string, work: () => Promise<void>) => Promise<void>) {
  const spy = vi.fn(request)
  Object.defineProperty(navigator, 'locks', { value: { request: spy }, configurable: true })
  return spy
}

it('works one after the other without locks, also after one has failed', async () => {
  await expect(exclusively('x', () => Promise.reject(new Error('first')))).rejects.toThrow('first')
  expect(await twoAtOnce()).toEqual(IN_TURN)
})

it('asks the browser for its lock where there is one, and works in turn where that is refused', async () => {
  let turn: Promise<void> = Promise.resolve()
  const request = giveLocks((_name, work) => (turn = turn.then(work)))
  expect(await twoAtOnce()).toEqual(IN_TURN)
  expect(request).toHaveBeenCalledWith('x', expect.any(Function))
  giveLocks(() => Promise.reject(new DOMException('no', 'SecurityError')))
  expect(await twoAtOnce()).toEqual(IN_TURN)
})

it('does not work twice when the work itself fails', async () => {
  giveLocks((_name, work) => work())
  const work = vi.fn(() => Promise.reject(new Error('once')))
  await expect(exclusively('x', work)).rejects.toThrow('once')
  expect(work).toHaveBeenCalledOnce()
})
