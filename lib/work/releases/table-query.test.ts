import { describe, expect, it } from 'vitest'
import { readTableQuery } from './table-query'

describe('what an address asks of the table of a release', () => {
  it('is the catalogue from its first page where nothing is asked', () => {
    expect(readTableQuery({})).toMatchObject({
      order: 'catalogue',
      descending: false,
      page: 1,
      classes: [],
      problems: [],
    })
  })

  it('is an order, a page, classes by comma or by repeating, and blank fields of the form are nothing', () => {
    expect(
      readTableQuery({ sort: '-mean', page: '3', class: 'A,B', known: 'no', q: ' arc ', near: '', radius: '' }),
    ).toMatchObject({
      ...{ order: 'mean', descending: true, page: 3, classes: ['A', 'B'], known: 'no', text: 'arc', near: null },
      problems: [],
    })
    expect(readTableQuery({ class: ['C', 'none'] }).classes).toEqual(['C', 'none'])
  })

  it.each([
    ['150.1 2.2', 150.1, 2.2],
    ['150.1, -2.2', 150.1, -2.2],
    ['10:00:24 +02:12:00', 150.1, 2.2],
    ['10 00 24 -02 12 00', 150.1, -2.2],
    ['10h00m24s - 02d12m00s', 150.1, -2.2],
  ])('reads the position %s', (near, raDeg, decDeg) => {
    const query = readTableQuery({ near, radius: '30' })
    expect(query.problems).toEqual([])
    expect(query.near!.raDeg).toBeCloseTo(raDeg, 9)
    expect(query.near!.decDeg).toBeCloseTo(decDeg, 9)
    expect(query.near!.radiusDeg).toBe(0.5)
  })

  it.each([
    [{ sort: 'secret' }, /cannot be sorted by 'secret'/],
    [{ page: '0' }, /'0' is no page/],
    [{ page: '1; drop table' }, /is no page/],
    [{ class: 'D' }, /'D' is no class/],
    [{ known: 'perhaps' }, /yes or no, not 'perhaps'/],
    [{ near: 'M31' }, /position 'M31' cannot be read/],
    [{ near: '400 2' }, /not between 0 and 360/],
    [{ near: '10 95' }, /not between -90 and 90/],
    [{ near: '10 5', radius: 'wide' }, /radius 'wide' is no number/],
    [{ near: '10 5', radius: '-3' }, /radius '-3' is no number/],
    [{ radius: '3' }, /needs a position/],
    [{ q: 'x'.repeat(300) }, /first 200 characters/],
  ])('says what it cannot read and goes on without it: %j', (asked, sentence) => {
    const query = readTableQuery(asked)
    expect(query.problems.join(' ')).toMatch(sentence)
    expect(query.near).toBeNull()
    expect(query.text.length).toBeLessThanOrEqual(200)
  })
})
