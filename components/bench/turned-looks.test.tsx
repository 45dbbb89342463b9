import { fireEvent } from '@testing-library/react'
import { describe, expect, it } from 'vitest'
import { turnedStyle } from '@/components/light/turned'
import { benchCandidate, supply } from './_candidates'
import { freshRoom, grades, look, name, open, pause, room } from './_bench-room'
import { openSession, reduceSession, type Supplied } from './bench-session'

freshRoom()

const turnedQueue = (turned: number): Supplied => ({
  ...supply([1, 2]),
  candidates: [{ ...benchCandidate(1), turned }, benchCandidate(2)],
})

describe('a candidate that comes back', () => {
  it('is shown turned in every view, in the strip too, and answered as what it is', async () => {
    room.queue = turnedQueue(5)
    const { user } = await open()
    const large = document.querySelector<HTMLElement>('figure img')?.parentElement
    expect(large?.style.transform).toBe('rotate(-90deg) scaleX(-1)')
    const slides = [...document.querySelectorAll<HTMLElement>('[aria-label="Views"] img')]
    expect(slides.length).toBe(3)
    for (const slide of slides) expect(slide.style.transform).toBe('rotate(-90deg) scaleX(-1)')
    await user.keyboard('b')
    await pause(50)
    expect(grades()[0].body).toMatchObject({ grade: 'B', turned: 5 })
    await look()
    expect(name()).toBe('SWS-2')
    expect(document.querySelector<HTMLElement>('figure img')?.parentElement?.style.transform).toBe('none')
    await user.keyboard('n')
    await pause(50)
    expect(grades()[1].body).not.toHaveProperty('turned')
  })

  it('comes again although it was graded in this sitting, and once', () => {
    const answer = { grade: 'A' as const, tags: [], remark: '', reason: null }
    const graded = (session: ReturnType<typeof openSession>) =>
      reduceSession(session, { type: 'graded', answer, view: null, seconds: 1, at: 0 })
    const supplied = (session: ReturnType<typeof openSession>, offered: Supplied) =>
      reduceSession(session, {
        type: 'supplied',
        supplied: offered,
        asked: 5,
        waiting: { candidateIds: [], firsts: 0 },
        resumed: false,
      })
    let session = graded(openSession(supply([1])))
    session = supplied(session, supply([1]))
    expect(session.upcoming).toEqual([])
    session = supplied(session, turnedQueue(3))
    expect(session.upcoming.map(({ id, turned }) => [id, turned])).toEqual([
      [1, 3],
      [2, undefined],
    ])
    session = supplied(graded(session), turnedQueue(3))
    expect(session.upcoming.map(({ id }) => id)).toEqual([2])
  })
})

describe('undo with a candidate that came back', () => {
  it('reaches both looks, and what another tab or the server says of the second leaves the first alone', () => {
    const answer = (grade: 'A' | 'B' | 'N') => ({ grade, tags: [], remark: '', reason: null })
    const give = (session: ReturnType<typeof openSession>, grade: 'A' | 'B' | 'N') =>
      reduceSession(session, { type: 'graded', answer: answer(grade), view: null, seconds: 1, at: 0 })
    const twice = {
      ...supply([1, 2]),
      candidates: [benchCandidate(1), benchCandidate(2), { ...benchCandidate(1), turned: 5 }],
    }
    let session = give(give(give(openSession(twice), 'A'), 'B'), 'N')
    const letters = () => session.given.map((look) => [look.candidate.id, look.candidate.turned, look.answer.grade])
    expect(letters()).toEqual([
      [1, undefined, 'A'],
      [2, undefined, 'B'],
      [1, 5, 'N'],
    ])
    session = reduceSession(session, {
      type: 'given elsewhere',
      grades: [{ candidateId: 1, turned: 5, answer: answer('B'), first: false }],
    })
    expect(letters()[0]).toEqual([1, undefined, 'A'])
    expect(letters()[2]).toEqual([1, 5, 'B'])
    session = reduceSession(session, { type: 'refused', candidateId: 1, turned: 5 })
    expect(letters()).toEqual([
      [1, undefined, 'A'],
      [2, undefined, 'B'],
    ])
  })

  it('reaches both after a reload too, and the sum of the sitting stays', async () => {
    room.queue = { ...supply([1]), candidates: [benchCandidate(1), { ...benchCandidate(1), turned: 5 }] }
    room.standing = { answer: { id: 'x', grade: 'A', tags: [], reason: null, remark: null }, open: true }
    const first = await open()
    await first.user.keyboard('a')
    await look()
    await first.user.keyboard('n')
    await pause(50)
    first.close()
    room.queue = { ...supply([]), candidates: [], given: 1, left: 0 }
    const again = await open()
    await pause(60)
    expect(document.body).toHaveTextContent('you graded 2 candidates: 1 sure, 1 not a lens')
    await again.user.keyboard('z')
    expect(document.querySelector<HTMLElement>('figure img')?.parentElement?.style.transform).toBe(
      'rotate(-90deg) scaleX(-1)',
    )
    await again.user.keyboard('z')
    expect(document.querySelector<HTMLElement>('figure img')?.parentElement?.style.transform).toBe('none')
  })
})

it('a picture that is not the shown one opens no grade key', async () => {
  const { user } = await open()
  await user.keyboard('a')
  const hidden = [...document.querySelectorAll('figure img')].find(
    (image) => image.getAttribute('aria-hidden') === 'true',
  )
  fireEvent.load(hidden!)
  await pause(140)
  await user.keyboard('n')
  expect(grades()).toHaveLength(1)
  expect(name()).toBe('SWS-2')
})

it.each([
  [undefined, undefined],
  [1, 'rotate(-90deg)'],
  [2, 'rotate(-180deg)'],
  [4, 'scaleX(-1)'],
  [7, 'rotate(-270deg) scaleX(-1)'],
])('turn %s is drawn by %s', (turned, transform) => {
  expect(turnedStyle(turned)?.transform).toBe(transform)
})
