import { act, cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { benchCandidate } from '@/components/bench/_candidates'
import { confusionOf } from '@/lib/work/calibration/confusion'
import type { PracticeState, PracticeTruth } from '@/lib/work/calibration/practice'
import { PracticeFirst } from './practice-first'
import { PracticeRoom } from './practice-room'

const state = (change: Partial<PracticeState> = {}): PracticeState => ({
  answered: 0,
  wanted: 3,
  stamps: 8,
  next: benchCandidate(1),
  own: confusionOf([]),
  ...change,
})

const TRUTH: PracticeTruth = {
  name: 'SWS0001',
  truth: 'lens',
  grade: 'N',
  explanation: 'A blue arc 1.4 arcsec to the north-east, painted over a real galaxy.',
  marks: {
    arcs: [
      {
        rays: [0, 3, 6].map((positionAngleDeg) => ({ positionAngleDeg, innerArcsec: 1.2, outerArcsec: 1.6 })),
        positionAngleDeg: 3,
        radiusArcsec: 1.4,
        lengthDeg: 9,
        brightness: 1,
      },
    ],
    middle: { east: 0, north: 0 },
    einsteinRadiusArcsec: 1.3,
  },
}

let sent: { url: string; body: Record<string, unknown> | null }[]
let answer: () => Response
let next: PracticeState

beforeEach(() => {
  sent = []
  answer = () => Response.json(TRUTH)
  next = state({ answered: 1, next: benchCandidate(2) })
  localStorage.clear()
  vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
    sent.push({ url, body: init.body ? (JSON.parse(String(init.body)) as Record<string, unknown>) : null })
    return init.method === 'PUT' ? answer() : Response.json(next)
  })
})
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

/** Pictures arrive, and longer passes than a key takes to bounce. */
async function look(): Promise<void> {
  for (const image of document.querySelectorAll('figure img')) fireEvent.load(image)
  await act(() => new Promise((resolve) => setTimeout(resolve, 140)))
}

const open = async (first = state(), lead = false, seen = true) => {
  render(<PracticeRoom slug="north" campaignName="North field" personId={7} lead={lead} first={first} />)
  if (seen) await look()
  return userEvent.setup()
}
const marks = () => screen.queryByRole('img', { name: 'Marks round the painted light' })

describe('practice', () => {
  it('takes no answer before the picture is there, nor from a key that bounces', async () => {
    const user = await open(state(), false, false)
    await user.keyboard('n')
    expect(sent).toEqual([])
    for (const image of document.querySelectorAll('figure img')) fireEvent.load(image)
    await look()
    await user.keyboard('n')
    await waitFor(() => expect(sent).toHaveLength(1))
  })

  it('takes an answer by the keys of the bench, tells the truth with the light marked, and goes on by Enter', async () => {
    const user = await open()
    expect(screen.queryByText(/painted over/)).toBeNull()
    await user.keyboard('n')
    expect(await screen.findByRole('heading', { name: 'A lens' })).toBeInTheDocument()
    expect(sent[0]).toMatchObject({ url: '/api/campaigns/north/practice/1', body: { grade: 'N' } })
    expect(screen.getAllByText(/A blue arc 1.4 arcsec to the north-east/).length).toBeGreaterThan(0)
    expect(screen.getByText(/You said N, not a lens. It is a lens, against your answer./)).toBeInTheDocument()
    expect(marks()).toBeInTheDocument()
    expect(screen.getByRole('button', { name: 'Next stamp' })).toHaveFocus()
    await user.keyboard('{Enter}')
    expect(await screen.findByRole('heading', { name: 'SWS-2' })).toBeInTheDocument()
    expect(marks()).toBeNull()
  })

  it('takes the marks off while the blink key or the picture is held', async () => {
    const user = await open()
    await user.keyboard('n')
    await screen.findByRole('heading', { name: 'A lens' })
    act(() => (document.activeElement as HTMLElement).blur())
    fireEvent.keyDown(window, { key: 'x', code: 'KeyX' })
    expect(marks()).toBeNull()
    fireEvent.keyUp(window, { key: 'x', code: 'KeyX' })
    expect(marks()).toBeInTheDocument()
    const picture = marks()!.parentElement!
    fireEvent.pointerDown(picture)
    expect(marks()).toBeNull()
    fireEvent.pointerUp(picture)
    expect(marks()).toBeInTheDocument()
  })

  it('marks north-east light up and to the left, where east is left', async () => {
    const user = await open()
    await user.keyboard('n')
    await screen.findByRole('heading', { name: 'A lens' })
    const [x, y] = marks()!.querySelector('path')!.getAttribute('d')!.slice(1).split('L')[2].split(' ').map(Number)
    // 16 arcsec wide: (1.6 + 0.15) arcsec at 6 degrees from north towards east, of 100 units.
    expect(x).toBeCloseTo(50 - (100 * 1.75 * Math.sin((6 * Math.PI) / 180)) / 16, 1)
    expect(y).toBeCloseTo(50 - (100 * 1.75 * Math.cos((6 * Math.PI) / 180)) / 16, 1)
  })

  it('hears no second answer to the same stamp', async () => {
    const user = await open()
    await user.keyboard('nab')
    await screen.findByRole('heading', { name: 'A lens' })
    await user.keyboard('c')
    expect(sent.filter(({ body }) => body)).toHaveLength(1)
  })

  it('says why an answer was not taken, and takes it again', async () => {
    answer = () => Response.json({ detail: 'This stamp is not the one that practice shows you now.' }, { status: 409 })
    const user = await open()
    await user.keyboard('a')
    expect(await screen.findByRole('alert')).toHaveTextContent('not the one that practice shows')
    answer = () => Response.json({ ...TRUTH, grade: 'A' })
    await user.keyboard('a')
    expect(await screen.findByText(/as you said./)).toBeInTheDocument()
    await waitFor(() => expect(screen.queryByRole('alert')).toBeNull())
  })

  it('says honestly that there is nothing to practise on, and sends a lead to make some', async () => {
    const nothing = state({ stamps: 0, wanted: 0, next: null })
    await open(nothing)
    expect(screen.getByRole('heading', { name: 'Nothing to practise on yet' })).toBeInTheDocument()
    expect(screen.getByRole('link', { name: 'To the bench' })).toHaveAttribute('href', '/campaigns/north/bench')
    cleanup()
    await open(nothing, true)
    expect(screen.getByRole('link', { name: 'Make calibration stamps' })).toBeInTheDocument()
  })

  it('ends with the person’s own matrix and its intervals', async () => {
    const own = confusionOf([
      { truth: 'lens', grade: 'A', n: 8 },
      { truth: 'lens', grade: 'N', n: 2 },
    ])
    await open(state({ next: null, answered: 10, own }))
    expect(screen.getByText('8 of 10, 80 % (49 % to 94 %)')).toBeInTheDocument()
    expect(screen.getByText('Your answers in practice. Only you see them.')).toBeInTheDocument()
  })
})

it('a newcomer is told what is asked and where it is', () => {
  render(<PracticeFirst slug="north" campaignName="North field" wanted={5} answered={2} />)
  expect(screen.getByRole('heading', { name: '3 more in practice, then the bench' })).toBeInTheDocument()
  expect(screen.getByRole('link', { name: 'Go on' })).toHaveAttribute('href', '/campaigns/north/practice')
})
