import { act, fireEvent, render, screen, waitFor } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useLayoutEffect } from 'react'
import { afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest'
import { planesAnswer, stubCanvas } from './_light-fixture'
import { LightSection } from './light-section'
import { LightStore } from './light-store'
import { LitBox } from './lit-box'
import { useLight } from './use-light'
import { useLightKeys } from './use-light-keys'

let pictures: Uint8ClampedArray[]
let asked: string[]
let answer: () => Response | Promise<Response>
let serial = 0

// What the page fetches when Light is first opened.
beforeAll(async () => {
  await Promise.all([import('./light-panel'), import('./light-canvas')])
  planesAnswer()
})
beforeEach(() => {
  localStorage.clear()
  pictures = stubCanvas().pictures
  asked = []
  answer = planesAnswer
  vi.stubGlobal('fetch', async (url: string) => {
    asked.push(url)
    return answer()
  })
})
afterEach(() => {
  vi.unstubAllGlobals()
  vi.restoreAllMocks()
})

function Desk({ candidate, view, planesUrl, keys = true }: Shown) {
  const light = useLight(7, 'north')
  useLayoutEffect(() => light.show(candidate), [light, candidate])
  useLightKeys(keys, light, () => {})
  return (
    <>
      <LitBox
        key={candidate}
        light={light}
        planesUrl={planesUrl}
        view={view}
        size={{ width: 80, height: 80 }}
        geometry={{ pixelScaleArcsec: 0.2, northAngleDeg: 0, eastLeft: true }}
        scrolls={false}
      >
        <img alt="picture" src="/stamp" />
      </LitBox>
      <LightSection light={light} keys={keys} />
      <input aria-label="Remark" />
    </>
  )
}

interface Shown {
  candidate: number
  view: string
  planesUrl: string | null
  keys?: boolean
}

function open(shown: Partial<Shown> = {}) {
  const all: Shown = { candidate: 1, view: 'colour', planesUrl: `/planes/${serial++}`, ...shown }
  const { rerender, unmount } = render(<Desk {...all} />)
  const show = (more: Partial<Shown>) => rerender(<Desk {...all} {...more} />)
  return { user: userEvent.setup(), show, unmount }
}

const canvas = () => document.querySelector('canvas')
const live = () => waitFor(() => expect(canvas()?.hidden).toBe(false), { timeout: 4000 })
const slider = (name: string) => screen.getByRole<HTMLInputElement>('slider', { name })
const says = (name: string) => slider(name).getAttribute('aria-valuetext')
const frame = () => act(() => new Promise((resolve) => setTimeout(resolve, 40)))
const slide = async (name: string, value: number) => {
  fireEvent.input(slider(name), { target: { value: String(value) } })
  await frame()
}
const mean = (pixels: Uint8ClampedArray) => pixels.reduce((sum, value) => sum + value, 0) / pixels.length
const last = () => pictures[pictures.length - 1]

describe('Light', () => {
  it('fetches nothing and draws nothing until it is opened', async () => {
    open()
    await frame()
    expect(asked).toEqual([])
    expect(canvas()).toBeNull()
    expect(screen.getByRole('img', { name: 'picture' })).toBeVisible()
  })

  it('opens by key with the focus on the first slider, at the recipe’s own limits, and closes by key', async () => {
    const { user } = open()
    await user.keyboard('l')
    await live()
    expect(slider('Black')).toHaveFocus()
    // Of the default recipe: black at -1 sigma, softening 6 sigma; white 40 to 600 by the picture.
    expect(says('Black')).toBe('−1.0σ')
    expect(says('Softening')).toBe('6.0σ')
    expect(parseFloat(says('White') ?? '')).toBeGreaterThanOrEqual(40)
    await user.keyboard('l')
    expect(screen.queryByRole('slider')).toBeNull()
    expect(canvas()).toBeNull()
  })

  it('draws as the sliders move, stays when closed, and is told apart; one key brings the recipe’s picture back', async () => {
    const { user } = open()
    await user.keyboard('l')
    await live()
    const own = mean(last())
    await slide('White', 50)
    expect(mean(last())).toBeGreaterThan(own)
    expect(says('White')).toBe('3.6σ')
    await user.keyboard('l')
    expect(screen.getByRole('button', { name: /Light\s*changed/ })).toBeInTheDocument()
    expect(canvas()?.hidden).toBe(false)
    await user.keyboard('0')
    expect(screen.queryByText('changed')).toBeNull()
    expect(canvas()).toBeNull()
  })

  it('draws once a frame however fast the slider moves', async () => {
    const { user } = open()
    await user.keyboard('l')
    await live()
    await frame()
    const before = pictures.length
    const white = slider('White')
    for (let place = 100; place < 200; place++) fireEvent.input(white, { target: { value: String(place) } })
    await frame()
    expect(pictures.length - before).toBeLessThanOrEqual(3)
    expect(pictures.length).toBeGreaterThan(before)
  })

  it('changes stretch, weights and invert, each by button or key', async () => {
    const { user } = open()
    await user.keyboard('l')
    await live()
    const own = mean(last())
    await user.click(screen.getByRole('button', { name: 'linear' }))
    await frame()
    expect(screen.getByRole('button', { name: 'linear' })).toHaveAttribute('aria-pressed', 'true')
    expect(mean(last())).toBeLessThan(own)
    // A straight stretch has no softening.
    expect(slider('Softening')).toHaveAttribute('aria-disabled', 'true')
    await user.click(screen.getByRole('button', { name: 'asinh' }))
    await user.click(screen.getByText('Weights of the bands'))
    const before = last()
    await slide('i', 0)
    expect(last()).not.toEqual(before)
    expect(says('i')).toBe('×0.00')
    await user.keyboard('i')
    await frame()
    expect(mean(last())).toBeGreaterThan(180)
    await user.keyboard('0')
    await frame()
    expect(mean(last())).toBeCloseTo(own, 5)
    expect(says('i')).toBe('×1.00')
  })

  it('keeps limits by kind of view and offers weights only in colour', async () => {
    const { user, show } = open({ planesUrl: '/planes/kinds' })
    await user.keyboard('l')
    await live()
    await slide('Black', 300)
    show({ planesUrl: '/planes/kinds', view: 'band:g' })
    expect(says('Black')).toBe('−1.5σ')
    expect(screen.queryByText('Weights of the bands')).toBeNull()
    await slide('Black', 250)
    const set = says('Black')
    show({ planesUrl: '/planes/kinds', view: 'band:r' })
    expect(says('Black')).toBe(set)
  })

  it('zooms and resets by key; the scale bar follows', async () => {
    const { user } = open()
    const bar = () => document.querySelector('svg text')?.textContent
    expect(bar()).toBe('2″')
    await user.keyboard('++++')
    // Four steps of the square root of 2: 4 times, 4 arcsec across.
    expect(screen.getByText('4×')).toBeInTheDocument()
    expect(bar()).toBe('1″')
    await user.keyboard('{Shift>}{ArrowRight}{/Shift}')
    expect(document.querySelector<HTMLElement>('img')?.parentElement?.style.transform).toMatch(
      /scale\(4.*translate\(-3\./,
    )
    await user.keyboard('0')
    expect(bar()).toBe('2″')
    expect(screen.queryByText('4×')).toBeNull()
  })

  it('leaves keys alone while somebody types and when single keys are off', async () => {
    const { user, show } = open()
    await user.type(screen.getByRole('textbox'), 'l0i')
    expect(screen.queryByRole('slider')).toBeNull()
    screen.getByRole('textbox').blur()
    show({ keys: false })
    await user.keyboard('l')
    expect(screen.queryByRole('slider')).toBeNull()
    await user.click(screen.getByRole('button', { name: 'Light' }))
    await waitFor(() => expect(slider('Black')).toBeInTheDocument())
  })
})

describe('the choice', () => {
  it('stays for the next candidate, whole again, and for the next visit', async () => {
    const { user, show, unmount } = open()
    await user.keyboard('l')
    await live()
    await slide('Black', 300)
    await user.keyboard('++')
    const set = says('Black')
    show({ candidate: 2, planesUrl: '/planes/next' })
    await live()
    expect(says('Black')).toBe(set)
    expect(screen.getByRole('status', { name: 'Zoom' })).toHaveTextContent('1×')
    await act(() => new Promise((resolve) => setTimeout(resolve, 350)))
    unmount()
    open({ planesUrl: '/planes/later' })
    await live()
    expect(says('Black')).toBe(set)
  })

  it('can be switched off for the next candidate', async () => {
    const { user, show } = open()
    await user.keyboard('l')
    await live()
    await slide('Black', 300)
    await user.click(screen.getByRole('checkbox', { name: 'Keep for the next ones' }))
    expect(says('Black')).not.toBe('−1.0σ')
    show({ candidate: 2, planesUrl: '/planes/other' })
    await live()
    expect(says('Black')).toBe('−1.0σ')
    expect(screen.queryByText('changed')).toBeNull()
  })
})

describe('arrow keys pressed before the pixels are here', () => {
  const blackAfter = async (keys: string) => {
    let send = () => {}
    const sent = new Promise<void>((resolve) => (send = resolve))
    answer = () => sent.then(planesAnswer)
    const { user, unmount } = open()
    await user.keyboard('l')
    if (keys) await user.keyboard(keys)
    send()
    await live()
    await frame()
    const found = [slider('Black').value, screen.queryByText('changed') !== null]
    unmount()
    localStorage.clear()
    return found
  }

  it('move the first slider once they come', async () => {
    const [own] = await blackAfter('')
    const far = Number(own)
    expect(await blackAfter('{ArrowRight}{ArrowRight}{ArrowUp}{ArrowLeft}')).toEqual([String(far + 2), true])
    expect(await blackAfter('{PageUp}')).toEqual([String(far + 40), true])
    expect(await blackAfter('{Home}')).toEqual(['0', true])
    expect(await blackAfter('{Control>}{ArrowRight}{/Control}')).toEqual([own, false])
  })

  it('are kept while the panel itself is on its way, by those who opened it by key', () => {
    const light = new LightStore('test')
    light.setOpen(true)
    expect(light.hold(1)).toBe(false)
    light.setOpen(true, true)
    expect([light.hold(1), light.hold(40)]).toEqual([true, true])
    expect(light.takeHeld()).toEqual([1, 40])
    light.hold(1)
    light.setOpen(false)
    expect(light.takeHeld()).toEqual([])
  })

  it('are forgotten with the candidate that they were pressed for, and where nothing comes', () => {
    const light = new LightStore('test')
    const done: string[] = []
    const own = { view: 'colour', colour: true, bands: [], own: { black: 0, white: 1, softening: 1 } }
    light.show(1)
    light.whenDrawn(() => done.push('of the first'))
    light.show(2)
    light.whenDrawn(() => done.push('of the second'))
    light.setStatus('live', own)
    light.show(3)
    light.whenDrawn(() => done.push('of the third'))
    light.setStatus({ failed: 'The server cannot be reached.' }, null)
    light.setStatus('live', own)
    expect(done).toEqual(['of the second'])
  })
})

describe('where pixels cannot be drawn', () => {
  it('the picture stays and the reason is said', async () => {
    answer = () => Response.json({ detail: 'These cutouts have 9.0 million pixels.' }, { status: 413 })
    const { user } = open()
    await user.keyboard('l')
    expect(await screen.findByText('No live contrast: These cutouts have 9.0 million pixels.')).toBeInTheDocument()
    expect(canvas()?.hidden).toBe(true)
    expect(slider('Black')).toHaveAttribute('aria-disabled', 'true')
  })

  it('damaged pixels are refused', async () => {
    answer = () => new Response('<!doctype html>')
    const { user } = open()
    await user.keyboard('l')
    expect(await screen.findByText(/did not arrive whole/)).toBeInTheDocument()
  })

  it('a view that is not made of them stays, the next one is live', async () => {
    const { user, show } = open({ planesUrl: '/planes/still', view: 'unheard of' })
    await user.keyboard('l')
    expect(await screen.findByText(/This view stays as it is/)).toBeInTheDocument()
    expect(canvas()?.hidden).toBe(true)
    show({ planesUrl: '/planes/still', view: 'deep' })
    expect(canvas()?.hidden).toBe(false)
  })
})
