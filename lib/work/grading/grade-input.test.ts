import { describe, expect, it } from 'vitest'
import { GradeInput } from './grade-input'

describe('a grade as it arrives', () => {
  it('is complete with its letter alone', () => {
    expect(GradeInput.parse({ grade: 'A' })).toEqual({
      grade: 'A',
      asked: false,
      late: false,
      tags: [],
      turned: null,
      remark: null,
      view: null,
      seconds: null,
      reason: null,
      recipe: null,
    })
  })

  it('has its tags in one order and once each, so that equal grades compare equal', () => {
    expect(GradeInput.parse({ grade: 'A', tags: ['two images', 'arc', 'arc'] }).tags).toEqual(['arc', 'two images'])
  })

  it('keeps a remark as written but for blank ends, and takes a blank one for none', () => {
    expect(GradeInput.parse({ grade: 'N', remark: ' =1+1, "faint"\n<arc> & more ' }).remark).toBe(
      '=1+1, "faint"\n<arc> & more',
    )
    expect(GradeInput.parse({ grade: 'N', remark: '  ' }).remark).toBeNull()
  })

  it.each([
    ['no letter', {}],
    ['another letter', { grade: 'D' }],
    ['a small letter', { grade: 'a' }],
    ['an unknown tag', { grade: 'A', tags: ['galaxy'] }],
    ['a remark that is too long', { grade: 'A', remark: 'x'.repeat(2001) }],
    ['a negative time', { grade: 'A', seconds: -1 }],
    ['more than a day', { grade: 'A', seconds: 86_401 }],
    ['a time in words', { grade: 'A', seconds: '12' }],
    ['an id that is too short', { grade: 'A', id: 'abc' }],
    ['an id with other characters', { grade: 'A', id: 'abc def ghi' }],
    ['a reason beside a judgement', { grade: 'B', reason: 'too faint' }],
    ['an unknown reason', { grade: 'U', reason: 'bored' }],
    ['a field that is not known', { grade: 'A', remarks: 'lost otherwise' }],
  ])('is refused with %s', (_what, body) => {
    expect(GradeInput.safeParse(body).success).toBe(false)
  })
})
