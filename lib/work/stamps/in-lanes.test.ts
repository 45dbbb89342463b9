import { describe, expect, it } from 'vitest'
import { inLanes } from './in-lanes'

describe('work in lanes', () => {
  it('does every item once, never more at a time than there are lanes', async () => {
    const done: number[] = []
    let under = 0
    let most = 0
    await inLanes(3, [1, 2, 3, 4, 5, 6, 7, 8], async (item) => {
      most = Math.max(most, ++under)
      await new Promise((resolve) => setImmediate(resolve))
      under--
      done.push(item)
    })
    expect(done.toSorted()).toEqual([1, 2, 3, 4, 5, 6, 7, 8])
    expect(most).toBe(3)
  })

  it('begins nothing after a failure, waits for what is under way, and throws the first failure', async () => {
    const begun: number[] = []
    const ended: number[] = []
    const work = inLanes(2, [1, 2, 3, 4], async (item) => {
      begun.push(item)
      await new Promise((resolve) => setTimeout(resolve, item === 2 ? 20 : 1))
      if (item === 1) throw new Error('the disk is full')
      ended.push(item)
    })
    await expect(work).rejects.toThrow('the disk is full')
    expect(begun).toEqual([1, 2])
    expect(ended).toEqual([2])
  })
})
