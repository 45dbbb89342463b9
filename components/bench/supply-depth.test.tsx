import { expect, it } from 'vitest'
import { supplyDepth } from './supply-depth'

const looks = (number: number, seconds: number) => Array.from({ length: number }, () => ({ seconds }))

it('three minutes of work lie ready, six candidates at least and fifty at most', () => {
  expect(supplyDepth(looks(20, 10))).toEqual({ target: 18, low: 12 })
  expect(supplyDepth(looks(20, 90))).toEqual({ target: 6, low: 4 })
  expect(supplyDepth(looks(20, 0.5))).toEqual({ target: 50, low: 34 })
})

it('goes by the pace of late, and waits until there is one', () => {
  expect(supplyDepth([...looks(40, 0.5), ...looks(20, 60)]).target).toBe(6)
  expect(supplyDepth(looks(4, 0.5)).target).toBe(6)
})
