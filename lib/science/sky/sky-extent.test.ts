import { describe, expect, it } from 'vitest'
import { skyExtent } from './sky-extent'

const at = (raDeg: number, decDeg: number) => ({ raDeg, decDeg })

describe('skyExtent', () => {
  it('goes over right ascension 0', () => {
    const extent = skyExtent([at(359, 0), at(1, 0)])!
    expect(extent.centre.raDeg % 360).toBeCloseTo(0, 9)
    expect(extent.radiusDeg).toBeCloseTo(1, 9)
  })

  it('is a pole for positions round it', () => {
    const extent = skyExtent([at(0, 89), at(90, 89), at(180, 89), at(270, 89)])!
    expect(extent.centre.decDeg).toBeCloseTo(90, 9)
    expect(extent.radiusDeg).toBeCloseTo(1, 9)
  })

  it('is the position itself for one', () => {
    expect(skyExtent([at(150.1, 2.2)])!.radiusDeg).toBeCloseTo(0, 6)
  })

  it('is none for no position and for positions all round the sky', () => {
    expect(skyExtent([])).toBeNull()
    expect(skyExtent([at(0, 0), at(90, 0), at(180, 0), at(270, 0)])).toBeNull()
  })
})
