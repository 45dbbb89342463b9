import { describe, expect, it } from 'vitest'
import type { FitsHeader } from '@/lib/science/fits/fits-types'
import { bandOfFilter, bandOfHeader, bandsOfCube } from './band-of-header'

const GRI = ['g', 'r', 'i']

describe('the band that a filter names', () => {
  // Spellings as these instruments write them: MegaCam at CFHT, Hyper Suprime-Cam, DECam, OmegaCAM, ACS.
  it.each([
    ['g.MP9401', 'g r i', 'g'],
    ['HSC-G', 'g r i', 'g'],
    ['HSC-R2', 'g r i', 'r'],
    ['r DECam SDSS c0002 6415.0 1480.0', 'g r i', 'r'],
    ['OCAM_i_SDSS', 'g r i', 'i'],
    ['F814W', 'F475W F814W', 'F814W'],
    ['CLEAR1L;F814W', 'F475W F814W', 'F814W'],
    [' G ', 'g r i', 'g'],
    ['R', 'r R', 'R'],
  ])('%s among %s is %s', (text, bands, band) => {
    expect(bandOfFilter(text, bands.split(' '))).toBe(band)
  })

  it.each(['z.MP9801', 'g+r', 'g,r', '', 'white'])('%j is none of g, r, i', (text) => {
    expect(bandOfFilter(text, GRI)).toBeNull()
  })
})

describe('a header', () => {
  it('tells its band by FILTER before BAND', () => {
    expect(bandOfHeader({ BAND: 'i', FILTER: 'g.MP9401' }, GRI).band).toBe('g')
  })

  it('goes on to the next keyword when one names no band, and remembers what it said', () => {
    expect(bandOfHeader({ FILTER: 'CLEAR', BAND: 'r' }, GRI)).toEqual({ band: 'r', said: ["FILTER = 'CLEAR'"] })
  })

  it('names no band when its keywords are not text', () => {
    expect(bandOfHeader({ FILTER: 3 }, GRI)).toEqual({ band: null, said: [] })
  })
})

describe('the planes of a cube', () => {
  it.each([
    [{ BANDS: 'i,r,g' }, ['i', 'r', 'g']],
    [{ BANDS: 'gri' }, ['g', 'r', 'i']],
    [{ FILTER1: 'HSC-I', FILTER2: 'HSC-R', FILTER3: 'HSC-G' }, ['i', 'r', 'g']],
    [{ BAND1: 'r', BAND2: 'g', BAND3: 'i' }, ['r', 'g', 'i']],
  ])('are named by %j', (header, bands) => {
    expect(bandsOfCube(header, 3, GRI)).toEqual(bands)
  })

  it.each<FitsHeader>([{ BANDS: 'g,r' }, { BANDS: 'g,g,i' }, { FILTER1: 'g', FILTER2: 'r' }, {}])(
    'are not named when %j leaves one open',
    (header) => {
      expect(bandsOfCube(header, 3, GRI)).toBeNull()
    },
  )
})
