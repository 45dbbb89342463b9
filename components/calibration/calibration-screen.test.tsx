import { cleanup, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import type { CalibrationPage, Galaxy } from '@/lib/work/calibration/calibration-page'
import { CalibrationScreen } from './calibration-screen'

const page = (change: Partial<CalibrationPage> = {}): CalibrationPage => ({
  counts: { lenses: 0, others: 0, waiting: 0 },
  stamps: [],
  work: null,
  fault: null,
  last: null,
  ...change,
})
const galaxy = (id: number): Galaxy => ({ id, name: `SWS-${id}`, state: 'set aside', grades: 3, picture: null })

let sent: { url: string; body: Record<string, unknown> | null }[]
let order: () => Response
beforeEach(() => {
  sent = []
  order = () => Response.json({ order: 'x' }, { status: 202 })
  vi.stubGlobal('fetch', async (url: string, init: RequestInit = {}) => {
    const body = init.body ? (JSON.parse(String(init.body)) as Record<string, unknown>) : null
    sent.push({ url, body })
    if (url.endsWith('/preview')) {
      const [id] = (body?.galaxies ?? []) as number[]
      const views = [{ key: 'colour', url: 'data:image/png;base64,', width: 80, height: 80 }]
      return Response.json({
        samples: [{ id, name: `SWS-${id}`, views, explanation: 'A blue arc to the north.', truth: null, fault: null }],
      })
    }
    if (url.includes('/galaxies')) return Response.json({ galaxies: [galaxy(9)] })
    if (init.method === 'POST') return order()
    return Response.json(page({ work: { done: 1, total: 2 } }))
  })
})
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

const open = (first = page()) => {
  render(
    <CalibrationScreen slug="north" page={first} first={{ which: 'set aside', galaxies: [galaxy(1), galaxy(2)] }} />,
  )
  return userEvent.setup()
}
const orders = () => sent.filter(({ url, body }) => url === '/api/campaigns/north/calibration' && body)

describe('the room where stamps are painted', () => {
  it('previews a chosen galaxy by the ranges that stand there', async () => {
    const user = open()
    expect(screen.getByText('Choose a galaxy to see it painted over.')).toBeInTheDocument()
    await user.click(screen.getByRole('button', { name: /SWS-1/ }))
    expect(await screen.findByText('A blue arc to the north.')).toBeInTheDocument()
    const widest = screen.getByLabelText('Einstein radius, to')
    await user.clear(widest)
    await user.type(widest, '3')
    await waitFor(() =>
      expect(sent.at(-1)?.body).toMatchObject({ galaxies: [1], ranges: { einsteinRadiusArcsec: [0.6, 3] } }),
    )
  })

  it('makes half of the chosen into lenses unless told otherwise, and shows how far it is', async () => {
    const user = open()
    expect(screen.getByRole('button', { name: 'Choose galaxies first' })).toBeDisabled()
    await user.click(screen.getByRole('button', { name: 'Choose all 2 shown' }))
    await user.click(screen.getByRole('button', { name: 'Make 2 stamps' }))
    expect(orders()[0].body).toMatchObject({ galaxies: [1, 2], lenses: 1, others: 1 })
    expect(await screen.findByText('Painting: 1 of 2 stamps made.')).toBeInTheDocument()
    expect(screen.getByText('None chosen')).toBeInTheDocument()
  })

  it('says why an order was refused and keeps what was chosen', async () => {
    order = () =>
      Response.json(
        {
          detail: 'Some fields are wrong.',
          invalid_params: [{ name: 'galaxies', reason: 'Choose more, or make fewer.' }],
        },
        { status: 422 },
      )
    const user = open()
    await user.click(screen.getByRole('button', { name: /SWS-2/ }))
    await user.clear(screen.getByLabelText('Lenses'))
    await user.type(screen.getByLabelText('Lenses'), '7')
    await user.click(screen.getByRole('button', { name: /Make 7 stamps/ }))
    expect(await screen.findByText('Choose more, or make fewer.')).toBeInTheDocument()
    expect(screen.getByText('1 galaxy chosen')).toBeInTheDocument()
  })

  it('names the galaxies that could not be used', () => {
    const skipped = [{ name: 'SWS-4', reason: 'Its middle is saturated, as of a bright star.' }]
    open(page({ last: { order: 'x', made: 1, wanted: 2, skipped, at: '2026-01-01T00:00:00.000Z' } }))
    expect(screen.getByText(/1 of 2 stamps came of the last order. 1 galaxy could not be used:/)).toBeInTheDocument()
    expect(screen.getByText(/Its middle is saturated/)).toBeInTheDocument()
  })

  it('looks for other galaxies by what was made of them and by name', async () => {
    const user = open()
    await user.click(screen.getByRole('button', { name: 'All' }))
    expect(await screen.findByRole('button', { name: /SWS-9/ })).toBeInTheDocument()
    await user.type(screen.getByLabelText('Part of the name'), '09{Enter}')
    await waitFor(() => expect(sent.at(-1)?.url).toContain('which=any&name=09'))
  })
})
