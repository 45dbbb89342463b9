import { describe, expect, it } from 'vitest'
import { nameMatcher } from './name-pattern'

describe('the name pattern', () => {
  // The names of /-separated surveys and of people; the expected values follow from the pattern's definition.
  it.each([
    [null, 'g r i', 'SWS0417_g.fits', 'SWS0417', 'g'],
    [null, 'g r i', 'deep/north/SWS0417_R.FITS.gz', 'SWS0417', 'r'],
    [null, 'g r i', 'SWS_0417_i.fit.fz', 'SWS_0417', 'i'],
    [null, 'g r i', 'J001234.5-012345_g.fits', 'J001234.5-012345', 'g'],
    [null, 's Ks', 'SWS1_Ks.fits', 'SWS1', 'Ks'],
    [null, 'r R', 'SWS1_R.fits', 'SWS1', 'R'],
    [null, 'r R', 'SWS1_r.fits', 'SWS1', 'r'],
    ['{band}-{candidate}', 'F475W F814W', 'f814w-SWS1.fits', 'SWS1', 'F814W'],
    ['{candidate}_{band}.fits', 'g r i', 'SWS1_g.fits', 'SWS1', 'g'],
    ['cut_{any}_{candidate}_{band}', 'g r i', 'cut_v2_SWS1_g.fits', 'SWS1', 'g'],
    ['{candidate}/{band}', 'g r i', 'north/SWS1/g.fits', 'SWS1', 'g'],
    ['{candidate}/{candidate}_{band}', 'g r i', 'SWS1/SWS1_g.fits', 'SWS1', 'g'],
    ['{candidate}', 'g r i', 'SWS1.fits', 'SWS1', null],
    ['{candidate}(1)_{band}', 'g r i', 'SWS1(1)_g.fits', 'SWS1', 'g'],
  ])('%s with bands %s reads %s as %s in band %s', (pattern, bands, name, candidate, band) => {
    expect(nameMatcher(pattern, bands.split(' ')).match(name)).toEqual({ candidate, band })
  })

  it.each([
    [null, 'SWS0417.fits'],
    [null, 'SWS0417_z.fits'],
    [null, '_g.fits'],
    ['{candidate}/{candidate}_{band}', 'SWS1/SWS2_g.fits'],
    ['{candidate}/{band}', 'g.fits'],
  ])('%s does not fit %s', (pattern, name) => {
    expect(nameMatcher(pattern, ['g', 'r', 'i']).match(name)).toBeNull()
  })

  it.each([
    ['{any}{any}{any}{any}{any}{any}{any}{candidate}#', 'a'.repeat(255)],
    ['{any}a{any}a{any}a{any}a{any}a{any}a{any}a{candidate}#', 'a'.repeat(255)],
    ['{any}{candidate}{any}{candidate}{any}#', 'ab'.repeat(127)],
  ])('%s answers for a name of the longest kind without trying every way to cut it', (pattern, name) => {
    // Tried in every way, the first alone would be more than 10^12 cuts.
    expect(nameMatcher(pattern, ['g']).match(name)).toBeNull()
  })

  it('in any case keeps each letter in its place, also those that have two letters in the other case', () => {
    expect(nameMatcher('{candidate}_{band}', ['g']).match('\u0130I_G.fits')).toEqual({
      candidate: '\u0130I',
      band: 'g',
    })
  })
})
