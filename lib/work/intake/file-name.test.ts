import { describe, expect, it } from 'vitest'
import { baseName, cleanFileName, fileNameOfPath, isManifestName, withoutEndings } from './file-name'

describe('the name of a delivered file', () => {
  it('keeps its folders, with either slash, and drops empty parts and dots', () => {
    expect(cleanFileName('night 1//./SWS1_g.fits')).toBe('night 1/SWS1_g.fits')
    expect(cleanFileName('night\\SWS1_g.fits')).toBe('night/SWS1_g.fits')
  })

  it('has one spelling whichever way its accents were composed', () => {
    expect(cleanFileName('e\u0301toile.fits')).toBe('\u00e9toile.fits')
  })

  it.each([
    ['a\u0000b.fits', /control characters/],
    ['a\u202eb.fits', /control characters/],
    ['a\nb.fits', /control characters/],
    ['../secret.fits', /'\.\.'/],
    ['a/..\\b.fits', /'\.\.'/],
    ['', /no name/],
    ['/./', /no name/],
    ['x'.repeat(256), /256 characters/],
  ])('is refused when it is %j', (name, sentence) => {
    expect(() => cleanFileName(name)).toThrow(sentence)
  })

  it('may have 255 characters', () => {
    expect(cleanFileName('x'.repeat(255))).toHaveLength(255)
  })

  it('is read from an address part by part, so that an encoded percent sign stays one', () => {
    expect(fileNameOfPath('/api/campaigns/north/files/a%20b/100%25%5Fg.fits')).toBe('a b/100%_g.fits')
  })

  it('is refused when the address is not percent-encoded UTF-8', () => {
    expect(() => fileNameOfPath('/api/campaigns/north/files/%E0%A4%A.fits')).toThrow(/percent-encoded/)
  })

  it('is refused when an encoded address climbs out of the folder', () => {
    expect(() => fileNameOfPath('/api/campaigns/north/files/%2E%2E%2Fsecret.fits')).toThrow(/'\.\.'/)
  })
})

describe('endings', () => {
  it.each([
    ['SWS1_g.fits', 'SWS1_g'],
    ['SWS1_g.fits.gz', 'SWS1_g'],
    ['SWS1_g.FIT.fz', 'SWS1_g'],
    ['J0012.5_g.fts', 'J0012.5_g'],
    ['.fits', '.fits'],
  ])('%s is %s without them', (name, bare) => {
    expect(withoutEndings(name)).toBe(bare)
  })

  it('go, and folders with them, from a base name', () => {
    expect(baseName('north.fits/SWS1_g.fits')).toBe('SWS1_g')
  })

  it('tell a manifest by .csv in any case', () => {
    expect(isManifestName('a/List.CSV')).toBe(true)
    expect(isManifestName('list.csv.fits')).toBe(false)
  })
})
