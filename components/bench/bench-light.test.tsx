import { act, fireEvent, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { planesAnswer, stubCanvas } from '@/components/light/_light-fixture'
import { supply } from './_candidates'
import { Bench } from './bench'
import { closeOutboxes } from './outboxes'

let planes: string[]

// What the page fetches when Light is first opened.
beforeAll(async () => {
  await Promise.all([import('@/components/light/light-panel'), import('@/components/light/light-canvas')])
  planesAnswer()
})
beforeEach(() => {
  planes = []
  localStorage.clear()
  stubCanvas()
  vi.stubGlobal('fetch', async (url: string) => {
    if (!url.startsWith('/planes/')) return Response.json({ ...supply([1, 2, 3, 4]), until: '' })
    planes.push(url)
    return planesAnswer()
  })
})
afterEach(() => {
  closeOutboxes()
  vi.unstubAllGlobals()
  vi.restoreAllMocks()
})

async function open() {
  const user = userEvent.setup()
  render(
    <Bench
      slug="north"
      campaignName="North field"
      personId={7}
      lead={false}
      first={{ ...supply([1, 2, 3, 4]), until: '' }}
    />,
  )
  await look()
  return user
}

/** Pictures arrive, and longer passes than a key takes to bounce. */
async function look(): Promise<void> {
  for (const image of document.querySelectorAll('figure img')) fireEvent.load(image)
  await act(() => new Promise((resolve) => setTimeout(resolve, 140)))
}

const name = () => screen.getByRole('heading', { level: 1 }).textContent
const canvas = () => document.querySelector('canvas')

describe('Light at the bench', () => {
  it('fetches no pixels until it is in use, then also those of the next candidates', async () => {
    const user = await open()
    await user.keyboard('b')
    await look()
    expect(planes).toEqual([])
    await user.keyboard('l')
    await waitFor(() => expect(canvas()?.hidden).toBe(false), { timeout: 4000 })
    await waitFor(() => expect(new Set(planes)).toEqual(new Set(['/planes/2', '/planes/3', '/planes/4'])))
  })

  it('leaves grades and views to their keys while a slider has the focus, and the picture under the canvas', async () => {
    const user = await open()
    await user.keyboard('l')
    await waitFor(() => expect(canvas()?.hidden).toBe(false), { timeout: 4000 })
    expect(screen.getByRole('slider', { name: 'Black' })).toHaveFocus()
    await user.keyboard('2')
    expect(canvas()?.dataset.view).toBe('deep')
    expect(screen.getByRole('img', { name: 'SWS-1, deep' })).toBeInTheDocument()
    await user.keyboard('{ArrowRight}')
    expect(canvas()?.dataset.view).toBe('deep')
    await user.keyboard('a')
    expect(name()).toBe('SWS-2')
  })

  it('blinks live too', async () => {
    const user = await open()
    await user.keyboard('l')
    await waitFor(() => expect(canvas()?.hidden).toBe(false), { timeout: 4000 })
    await user.keyboard('2{x>}')
    expect(canvas()?.dataset.view).toBe('colour')
    await user.keyboard('{/x}')
    expect(canvas()?.dataset.view).toBe('deep')
  })

  it('lists its keys in the help', async () => {
    const user = await open()
    await user.keyboard('h')
    expect(await screen.findByRole('dialog')).toHaveTextContent(/light: black, white and softening/)
  })
})
