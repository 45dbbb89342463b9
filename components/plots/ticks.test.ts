import { describe, expect, it } from 'vitest'
import { labelEvery, linearScale, niceEnd, niceTicks, tickLabels } from './ticks'

describe('ticks', () => {
  it('are multiples of 1, 2 or 5 times a power of ten, within the domain, without rounding dust', () => {
    expect(niceTicks(0, 1, 5)).toEqual([0, 0.2, 0.4, 0.6, 0.8, 1])
    expect(niceTicks(0, 1, 10)).toEqual([0, 0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1])
    expect(niceTicks(-0.3, 1, 3)).toEqual([0, 0.5, 1])
    expect(niceTicks(13, 987, 5)).toEqual([200, 400, 600, 800])
    expect(niceTicks(0, 412, 4)).toEqual([0, 100, 200, 300, 400])
    expect(Object.is(niceTicks(-0.2, 0.2, 4)[2], 0)).toBe(true)
  })

  it('are one for a domain of one value and none where an end is no number', () => {
    expect(niceTicks(3, 3)).toEqual([3])
    expect(niceTicks(0, NaN)).toEqual([])
    expect(niceTicks(0, Infinity)).toEqual([])
  })

  it('are never many more than asked for', () => {
    for (let span = 0.001; span < 1e6; span *= 1.37) {
      for (const about of [2, 5, 10]) {
        const { length } = niceTicks(0, span, about)
        expect(length).toBeGreaterThanOrEqual(2)
        expect(length).toBeLessThanOrEqual(about * 1.5 + 2)
      }
    }
  })

  it('are labelled with the decimals of their step, a true minus and thousands apart', () => {
    expect(tickLabels([-0.5, 0, 0.5])).toEqual(['−0.5', '0.0', '0.5'])
    expect(tickLabels([0, 1000, 2000])).toEqual(['0', '1,000', '2,000'])
  })

  it('end an axis of counts at the first round value that holds the highest', () => {
    expect(niceEnd(301)).toBe(400)
    expect(niceEnd(300)).toBe(300)
    expect(niceEnd(0)).toBe(1)
  })

  it('are left out where their labels would run into each other', () => {
    expect(labelEvery(20, 940, 58)).toBe(2)
    expect(labelEvery(5, 940, 58)).toBe(1)
    expect(labelEvery(62, 300, 58)).toBe(20)
  })
})

describe('a linear scale', () => {
  it('maps ends to ends, also turned round, and a domain of nothing to the middle', () => {
    const up = linearScale([0, 10], [200, 100])
    expect([up(0), up(5), up(10)]).toEqual([200, 150, 100])
    expect(linearScale([3, 3], [0, 10])(3)).toBe(5)
  })
})
