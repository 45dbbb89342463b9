import { describe, expect, it } from 'vitest'
import { ConeError, MOST_RECORDS, readConeQuery, USUAL_RECORDS } from './cone-query'

const read = (query: string) => readConeQuery(new URLSearchParams(query))
const refusal = (query: string): string => {
  try {
    read(query)
  } catch (error) {
    if (error instanceof ConeError) return error.message
    throw error
  }
  return 'taken'
}

// Simple Cone Search 1.03, section 2.
describe('what a cone search asks for', () => {
  it('is RA, DEC and SR in degrees, with VERB=2 where nothing is said', () => {
    expect(read('RA=180.567&DEC=-30.45&SR=0.0125')).toEqual({
      ...{ raDeg: 180.567, decDeg: -30.45, radiusDeg: 0.0125 },
      ...{ verbosity: 2, mostRecords: USUAL_RECORDS, format: 'tabledata' },
    })
  })

  it('is read whatever the case and the order of the names, and passes over names it does not know', () => {
    expect(read('sr=1e-2&Dec=+2&ra=.5&verb=3&Catalog=x&ID=7&id=8')).toMatchObject({
      ...{ raDeg: 0.5, decDeg: 2, radiusDeg: 0.01, verbosity: 3 },
    })
  })

  it('takes RA=360 for 0', () => {
    expect(read('RA=360&DEC=0&SR=1').raDeg).toBe(0)
  })

  it('takes SR=0 and MAXREC=0, which ask for the columns, and lowers a MAXREC beyond the limit', () => {
    expect(read('RA=0&DEC=90&SR=0')).toMatchObject({ radiusDeg: 0 })
    expect(read('RA=0&DEC=90&SR=1&MAXREC=0')).toMatchObject({ mostRecords: 0 })
    expect(read('RA=0&DEC=90&SR=1&MAXREC=99999999999999999999')).toMatchObject({ mostRecords: MOST_RECORDS })
  })

  it.each([
    ['votable', 'tabledata'],
    ['text/xml', 'tabledata'],
    ['application/x-votable+xml', 'tabledata'],
    ['application/x-votable+xml; serialization=BINARY2', 'binary2'],
    ['votable/b2', 'binary2'],
  ])('answers RESPONSEFORMAT=%s in %s', (asked, format) => {
    expect(readConeQuery([...Object.entries({ RA: '1', DEC: '1', SR: '1', RESPONSEFORMAT: asked })]).format).toBe(
      format,
    )
  })

  it.each([
    ['', /^RA and DEC and SR are missing/],
    ['RA=1&DEC=1', /^SR is missing/],
    ['RA=&DEC=1&SR=1', /^RA= is not a number/],
    ['RA=as3f&DEC=1&SR=1', /^RA=as3f is not a number\. Give decimal degrees\.$/],
    ['RA=12:30:49&DEC=1&SR=1', /Sexagesimal values are not read/],
    ['RA=0x10&DEC=1&SR=1', /^RA=0x10 is not a number/],
    ['RA=NaN&DEC=1&SR=1', /^RA=NaN is not a number/],
    ['RA=Infinity&DEC=1&SR=1', /^RA=Infinity is not a number/],
    ['RA=1,5&DEC=1&SR=1', /^RA=1,5 is not a number/],
    ['RA=-1&DEC=1&SR=1', /^RA=-1 is out of range: it lies between 0 and 360 degrees/],
    ['RA=1e400&DEC=1&SR=1', /out of range/],
    ['RA=1&DEC=91.0&SR=1', /^DEC=91\.0 is out of range: it lies between -90 and 90 degrees/],
    ['RA=1&DEC=1&SR=-1', /^SR=-1 is out of range/],
    ['RA=1&DEC=1&SR=181', /^SR=181 is out of range: it lies between 0 and 180 degrees/],
    ['RA=1&ra=2&DEC=1&SR=1', /^RA is given more than once/],
    ['RA=1&DEC=1&SR=1&VERB=4', /^VERB=4 is not known/],
    ['RA=1&DEC=1&SR=1&MAXREC=-1', /^MAXREC=-1 is not a number of entries/],
    ['RA=1&DEC=1&SR=1&RESPONSEFORMAT=fits', /^RESPONSEFORMAT=fits is not offered/],
  ])('is refused with a sentence: %s', (query, sentence) => {
    expect(refusal(query)).toMatch(sentence)
  })
})
