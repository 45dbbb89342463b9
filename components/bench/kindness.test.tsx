import { describe, expect, it } from 'vitest'
import type { GradeLetter } from '@/db/schema/grading'
import { benchCandidate } from './_candidates'
import { breakOffer as offerAt, sittingSentence } from './kindness'

const MINUTE_MS = 60_000
/** One look each so many milliseconds, from the first minute on. */
const looks = (number: number, everyMs: number, seconds: number) =>
  Array.from({ length: number }, (_, index) => ({ at: MINUTE_MS + index * everyMs, seconds }))

/** A second after the newest look. */
const breakOffer = (given: ReturnType<typeof looks>, declinedAt: number) =>
  offerAt(given, declinedAt, (given.at(-1)?.at ?? 0) + 1000)

describe('a break is offered', () => {
  it('to nobody who comes back from one', () => {
    const [long, quick] = [looks(101, 30_000, 20), looks(20, 2000, 1.4)]
    for (const given of [long, quick]) {
      expect(offerAt(given, 0, given.at(-1)!.at + 4.9 * MINUTE_MS)).not.toBeNull()
      expect(offerAt(given, 0, given.at(-1)!.at + 5 * MINUTE_MS)).toBeNull()
    }
  })

  it('after fifty minutes without a pause, and not before', () => {
    expect(breakOffer(looks(101, 30_000, 20), 0)).toBe('long')
    expect(breakOffer(looks(100, 30_000, 20), 0)).toBeNull()
  })

  it('not to somebody who paused for five minutes in between', () => {
    const before = looks(60, 30_000, 20)
    const after = looks(60, 30_000, 20).map(({ at, seconds }) => ({ at: at + 60 * 30_000 + 5 * MINUTE_MS, seconds }))
    expect(breakOffer([...before, ...after], 0)).toBeNull()
  })

  it('after twenty in a row at which nobody can have looked for long, and not after nineteen', () => {
    expect(breakOffer(looks(20, 2000, 1.4), 0)).toBe('quick')
    expect(breakOffer(looks(19, 2000, 1.4), 0)).toBeNull()
    expect(breakOffer(looks(20, 2000, 1.6), 0)).toBeNull()
  })

  it('goes by the median, so that one long look among quick ones changes nothing', () => {
    const mixed = looks(20, 2000, 1).map((look, index) => (index < 9 ? { ...look, seconds: 40 } : look))
    expect(breakOffer(mixed, 0)).toBe('quick')
  })

  it('again only for what came after it was declined', () => {
    const quick = looks(30, 2000, 1)
    expect(breakOffer(quick, quick[25].at)).toBeNull()
    expect(
      breakOffer([...quick, ...looks(20, 2000, 1).map((look) => ({ ...look, at: look.at + MINUTE_MS }))], quick[25].at),
    ).toBe('quick')
  })

  it('not before anything was graded', () => {
    expect(breakOffer([], 0)).toBeNull()
  })
})

describe('the sum of a sitting', () => {
  const look = (grade: GradeLetter, seconds: number) => ({
    candidate: benchCandidate(1),
    answer: { grade, tags: [], remark: '', reason: null },
    view: null,
    seconds,
    at: 0,
  })

  it('counts by grade and tells the time spent looking', () => {
    expect(sittingSentence([look('N', 100), look('A', 60), look('N', 80), look('U', 3)])).toBe(
      'In this sitting you graded 4 candidates: 1 sure, 2 not a lens, 1 cannot judge. You looked for 4 minutes.',
    )
    expect(sittingSentence([look('C', 2)])).toBe(
      'In this sitting you graded one candidate: 1 possible. You looked for less than a minute.',
    )
    expect(sittingSentence([])).toBe('')
  })

  it('does not take a picture left in sight over lunch for an hour of looking', () => {
    expect(sittingSentence([look('N', 3600), look('N', 60)])).toMatch(/looked for 6 minutes\.$/)
    expect(sittingSentence(Array.from({ length: 20 }, () => look('N', 300)))).toMatch(/looked for 1 h 40 min\.$/)
  })
})
