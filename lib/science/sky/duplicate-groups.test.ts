import { describe, expect, it } from 'vitest'
import { duplicateGroups } from './duplicate-groups'

// Along the meridian a step in declination is the separation itself: exact cases, no outside source needed.
const along = (...arcsec: number[]) => ({
  raDeg: new Float64Array(arcsec.length).fill(359.9999),
  decDeg: Float64Array.from(arcsec, (value) => value / 3600),
})

describe('groups of positions that may be one object', () => {
  it('join friends of friends and say that they are a chain', () => {
    const [group, ...others] = duplicateGroups(along(0, 100, 1.5, 3, 4.5), 2)
    expect(others).toEqual([])
    expect(group.places).toEqual([0, 2, 3, 4])
    expect(group.widestArcsec).toBeCloseTo(4.5, 9)
    expect(group.isChain).toBe(true)
  })

  it('come in the order of their first members, without those who stand alone', () => {
    const groups = duplicateGroups(along(50, 0, 51, 200, 1), 2)
    expect(groups.map(({ places, isChain }) => ({ places, isChain }))).toEqual([
      { places: [0, 2], isChain: false },
      { places: [1, 4], isChain: false },
    ])
  })

  it('reach across RA 0/360 and round the pole', () => {
    const raDeg = Float64Array.of(0.0001, 359.9999, 0, 180)
    const decDeg = Float64Array.of(0, 0, 89.9999, 89.9999)
    expect(duplicateGroups({ raDeg, decDeg }, 1).map(({ places }) => places)).toEqual([
      [0, 1],
      [2, 3],
    ])
  })

  it('are none among positions that are apart, missing, or not there', () => {
    expect(duplicateGroups(along(0, 10, NaN, NaN), 2)).toEqual([])
    expect(duplicateGroups(along(), 2)).toEqual([])
  })
})
