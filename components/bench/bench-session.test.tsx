import { describe, expect, it } from 'vitest'
import type { GradeLetter } from '@/db/schema/grading'
import { benchCandidate, supply } from './_candidates'
import {
  currentDraft,
  currentLook,
  explainable,
  openSession,
  reduceSession,
  sameAnswer,
  type BenchAction,
  type BenchSession,
} from './bench-session'

const act = (session: BenchSession, ...actions: BenchAction[]) => actions.reduce(reduceSession, session)
const grade = (letter: GradeLetter, more: { remark?: string } = {}): BenchAction => ({
  type: 'graded',
  answer: { grade: letter, tags: [], remark: more.remark ?? '', reason: null },
  view: 'colour',
  seconds: 2,
  at: 0,
})
const refill = (ids: number[], more: Partial<BenchAction & { type: 'supplied' }> = {}): BenchAction => ({
  type: 'supplied',
  supplied: supply(ids),
  asked: ids.length,
  waiting: { candidateIds: [], firsts: 0 },
  resumed: false,
  ...more,
})
const onBench = (session: BenchSession) => currentLook(session)?.candidate.id
const letters = (session: BenchSession) =>
  session.given.map(({ candidate, answer }) => `${candidate.id}${answer.grade}`)

describe('grading', () => {
  it('brings the next candidate at once, on its first view, and counts', () => {
    const session = act(
      openSession(supply([1, 2, 3], { given: 10, left: 20 })),
      { type: 'view chosen', key: 'deep' },
      grade('A'),
    )
    expect(onBench(session)).toBe(2)
    expect(session).toMatchObject({ view: 'colour', previousView: null, counts: { given: 11, left: 19 } })
    expect(letters(session)).toEqual(['1A'])
  })

  it('ends with nothing on the bench, and does nothing there', () => {
    const session = act(openSession(supply([1])), grade('N'))
    expect(currentLook(session)).toBeNull()
    expect(act(session, grade('A'), { type: 'tag toggled', tag: 'arc' })).toEqual(session)
  })
})

describe('undo', () => {
  const three = () => act(openSession(supply([1, 2, 3, 4])), grade('A'), grade('B'), grade('C', { remark: 'faint' }))

  it('goes back to the candidate graded last with its grade, then further, and stops at the first', () => {
    const back = act(three(), { type: 'went back' })
    expect(currentLook(back)).toMatchObject({ candidate: { id: 3 }, answer: { grade: 'C' } })
    expect(currentDraft(back).remark).toBe('faint')
    const first = act(back, { type: 'went back' }, { type: 'went back' })
    expect(onBench(first)).toBe(1)
    expect(act(first, { type: 'went back' })).toEqual(first)
  })

  it('corrects in place when graded again, returns to the present and counts nothing twice', () => {
    const session = act(three(), { type: 'went back' }, { type: 'went back' }, grade('N'))
    expect(letters(session)).toEqual(['1A', '2N', '3C'])
    expect(onBench(session)).toBe(4)
    expect(session.counts).toEqual({ given: 3, left: 1 })
    expect(session.last).toEqual({ what: 'corrected', candidateId: 2 })
  })

  it('says kept and not corrected when the same is given again', () => {
    const session = act(three(), { type: 'went back' }, grade('C', { remark: 'faint ' }))
    expect(session.last?.what).toBe('kept')
  })

  it('keeps the grade on request and forgets what was typed over it', () => {
    const session = act(three(), { type: 'went back' }, { type: 'remark written', remark: 'x' }, { type: 'kept' })
    expect(onBench(session)).toBe(4)
    expect(currentDraft(act(session, { type: 'went back' })).remark).toBe('faint')
  })

  it('does nothing before the first grade', () => {
    const session = openSession(supply([1]))
    expect(act(session, { type: 'went back' }, { type: 'kept' })).toEqual(session)
  })

  it('keeps tags and remark of the candidate that was interrupted', () => {
    const session = act(three(), { type: 'tag toggled', tag: 'ring' }, { type: 'remark written', remark: 'half' })
    expect(currentDraft(act(session, { type: 'went back' }, { type: 'kept' }))).toEqual({
      tags: ['ring'],
      remark: 'half',
    })
  })
})

describe('tags and remark', () => {
  it('belong to one candidate and are taken off as they are put on', () => {
    const tag = { type: 'tag toggled', tag: 'arc' } as const
    const session = act(openSession(supply([1, 2])), tag)
    expect(currentDraft(session).tags).toEqual(['arc'])
    expect(currentDraft(act(session, tag)).tags).toEqual([])
    expect(currentDraft(act(session, grade('B'))).tags).toEqual([])
  })

  it('compare equal in any order of tags and with blank ends', () => {
    const answer = { grade: 'A', tags: ['arc', 'ring'], remark: 'x', reason: null } as const
    expect(sameAnswer({ ...answer, tags: ['ring', 'arc'], remark: ' x' }, { ...answer, tags: ['arc', 'ring'] })).toBe(
      true,
    )
    expect(sameAnswer({ ...answer, tags: ['arc'] }, { ...answer, tags: ['ring'] })).toBe(false)
  })
})

describe('views', () => {
  it('remember the one before, to blink against', () => {
    const session = act(
      openSession(supply([1])),
      { type: 'view chosen', key: 'deep' },
      { type: 'view chosen', key: 'deep' },
    )
    expect(session).toMatchObject({ view: 'deep', previousView: 'colour' })
  })
})

describe('cannot judge', () => {
  it('can be explained just after, and only then', () => {
    const session = act(openSession(supply([1, 2, 3])), grade('U'))
    expect(explainable(session)?.candidate.id).toBe(1)
    expect(act(session, { type: 'explained', reason: 'too faint' }).given[0].answer.reason).toBe('too faint')
    expect(explainable(act(session, grade('B')))).toBeNull()
    expect(explainable(act(session, { type: 'went back' }))).toBeNull()
  })
})

describe('refill', () => {
  it('appends what is new, never twice, and never what was graded or is on its way', () => {
    const session = act(
      openSession(supply([1, 2, 3])),
      grade('A'),
      refill([1, 2, 3, 8, 9], {
        waiting: { candidateIds: [1, 8], firsts: 2 },
        supplied: supply([1, 2, 3, 8, 9], { given: 5, left: 30 }),
      }),
    )
    expect(session.upcoming.map(({ id }) => id)).toEqual([2, 3, 9])
    expect(session.counts).toEqual({ given: 7, left: 28 })
  })

  it('drops what is no longer lent, but not from under the eyes', () => {
    const session = act(openSession(supply([1, 2, 3])), refill([3, 4]))
    expect(session.upcoming.map(({ id }) => id)).toEqual([1, 3, 4])
  })

  it('after an absence drops that too, and begins the new one on its first view', () => {
    const session = act(
      openSession(supply([1, 2])),
      { type: 'view chosen', key: 'deep' },
      refill([2, 3], { resumed: true }),
    )
    expect(session.upcoming.map(({ id }) => id)).toEqual([2, 3])
    expect(session.view).toBe('colour')
  })

  it('runs dry when the server has fewer than asked for although more is left', () => {
    const left = { supplied: supply([1], { left: 5 }), asked: 6 }
    expect(act(openSession(supply([1])), refill([1], left)).supply).toBe('dry')
    expect(act(openSession(supply([1])), refill([1], { ...left, supplied: supply([1]) })).supply).toBe('ready')
  })

  it('does not disturb somebody who looks back', () => {
    const session = act(
      openSession(supply([1, 2])),
      grade('A'),
      { type: 'went back' },
      { type: 'view chosen', key: 'deep' },
    )
    expect(act(session, refill([7], { resumed: true }))).toMatchObject({ lookingBack: 0, view: 'deep' })
  })
})

describe('a refused grade', () => {
  it('does not count as given', () => {
    const session = act(openSession(supply([1, 2, 3], { given: 4 })), grade('A'), grade('B'), {
      type: 'refused',
      candidateId: 1,
    })
    expect(letters(session)).toEqual(['2B'])
    expect(session.counts.given).toBe(5)
  })

  it('leaves whoever looks back where they are, or in the present if it was that one', () => {
    const back = act(openSession(supply([1, 2, 3])), grade('A'), grade('B'), { type: 'went back' })
    expect(onBench(act(back, { type: 'refused', candidateId: 1 }))).toBe(2)
    expect(onBench(act(back, { type: 'refused', candidateId: 2 }))).toBe(3)
  })
})

describe('grades of an earlier visit', () => {
  it('that are still on their way take their candidates off the bench and count as given', () => {
    const session = act(openSession(supply([1, 2, 3], { given: 5 })), {
      type: 'found waiting',
      candidateIds: [1, 9],
      firsts: 1,
    })
    expect(onBench(session)).toBe(2)
    expect(session).toMatchObject({ view: 'colour', counts: { given: 6, left: 2 } })
  })
})

describe('what comes from outside the sitting', () => {
  const answer = { grade: 'C' as const, tags: [], remark: '', reason: null }
  const earlier = (id: number) => ({ candidate: benchCandidate(id), answer, view: null, seconds: 1, at: 0 })

  it('looks from before a reload come before those since, whoever looks back stays where they are', () => {
    const session = act(openSession(supply([5, 6])), grade('A'), { type: 'went back' })
    const more = act(session, { type: 'recalled', looks: [earlier(1), earlier(2)], drafts: {} })
    expect(letters(more)).toEqual(['1C', '2C', '5A'])
    expect(onBench(more)).toBe(5)
    expect(onBench(act(more, { type: 'went back' }, { type: 'went back' }))).toBe(1)
  })

  it('a look from before a reload is none where its candidate is on the bench again', () => {
    const session = act(openSession(supply([5, 6])), { type: 'recalled', looks: [earlier(6)], drafts: {} })
    expect(letters(session)).toEqual([])
  })

  it('words from before a reload do not replace those written since', () => {
    const session = act(
      openSession(supply([5])),
      { type: 'remark written', remark: 'new' },
      { type: 'recalled', looks: [], drafts: { 5: { tags: [], remark: 'old' }, 6: { tags: [], remark: 'other' } } },
    )
    expect(session.drafts).toMatchObject({ 5: { remark: 'new' }, 6: { remark: 'other' } })
  })

  it('a grade of another tab takes its candidate away and is counted once; a correction changes what is looked back at', () => {
    const session = act(openSession(supply([1, 2, 3])), grade('A'), {
      type: 'given elsewhere',
      grades: [
        { candidateId: 2, answer, first: true },
        { candidateId: 1, answer, first: false },
      ],
    })
    expect(onBench(session)).toBe(3)
    expect(letters(session)).toEqual(['1C'])
    expect(session.counts).toEqual({ given: 2, left: 1 })
  })

  it('what stands at the server replaces what was remembered, and nothing standing takes the look away', () => {
    const session = act(openSession(supply([1, 2])), grade('A'))
    expect(letters(act(session, { type: 'stands', candidateId: 1, answer }))).toEqual(['1C'])
    expect(letters(act(session, { type: 'stands', candidateId: 1, answer: null }))).toEqual([])
  })
})
