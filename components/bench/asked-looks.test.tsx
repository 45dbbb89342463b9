import { act, fireEvent, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { benchCandidate, supply } from './_candidates'
import { Bench } from './bench'
import { openSession, reduceSession, type BenchAction } from './bench-session'

vi.mock('next/navigation', () => ({ useRouter: () => ({}), usePathname: () => '' }))

const asked = (id: number, ask: number) => ({
  ...benchCandidate(id),
  asked: { id: ask, by: 'avocet', note: 'Mind the counter-image.' },
})
const queue = { ...supply([2, 3]), candidates: [asked(1, 9), asked(4, 10), ...supply([2, 3]).candidates], left: 4 }
const sent: { url: string; body: Record<string, unknown> }[] = []

beforeEach(() => {
  localStorage.clear()
  sent.length = 0
  vi.stubGlobal('fetch', async (url: string, init?: RequestInit) => {
    if (init?.method !== 'PUT') return Response.json(queue)
    sent.push({ url, body: JSON.parse(String(init.body)) })
    return Response.json({ grade: { id: 'x' } })
  })
})
afterEach(() => vi.unstubAllGlobals())

describe('a look that was asked for', () => {
  it('says who asks, their note and how many more, and is sent as the answer to it', async () => {
    const user = userEvent.setup()
    render(<Bench slug="north" campaignName="North field" personId={7} lead={false} first={{ ...queue, until: '' }} />)
    for (const image of document.querySelectorAll('figure img')) fireEvent.load(image)
    await act(() => new Promise((resolve) => setTimeout(resolve, 140)))
    expect(screen.getByText('avocet asks for your look.')).toBeVisible()
    expect(screen.getByText('“Mind the counter-image.”')).toBeVisible()
    expect(screen.getByText('1 more asked of you')).toBeVisible()
    await user.keyboard('b')
    await waitFor(() => expect(sent).toHaveLength(1))
    expect(sent[0]).toMatchObject({ url: '/api/campaigns/north/candidates/1/grade', body: { grade: 'B', asked: 9 } })
  })
})

describe('in a sitting', () => {
  const supplied = (candidates: ReturnType<typeof benchCandidate>[]): BenchAction => ({
    type: 'supplied',
    supplied: { ...supply([]), candidates, left: candidates.length },
    asked: candidates.length,
    waiting: { candidateIds: [], firsts: 0 },
    resumed: false,
  })
  const grade: BenchAction = {
    type: 'graded',
    answer: { grade: 'A', tags: [], remark: '', reason: null },
    view: 'colour',
    seconds: 1,
    at: 0,
  }

  it('a candidate graded before comes again right after the present one, and once answered no more', () => {
    const first = [grade, supplied([asked(1, 9), benchCandidate(2), benchCandidate(3)])].reduce(
      reduceSession,
      openSession(supply([1, 2, 3])),
    )
    expect(first.upcoming.map(({ id }) => id)).toEqual([2, 1, 3])
    const answered = [grade, grade, supplied([asked(1, 9), benchCandidate(3)])].reduce(reduceSession, first)
    expect(answered.given.map(({ candidate }) => candidate.id)).toEqual([2, 1])
    expect(answered.upcoming.map(({ id }) => id)).toEqual([3])
  })
})
