import { act, cleanup, render, screen } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { beforeEach, describe, expect, it, vi } from 'vitest'
import { commandOf } from '@/components/bench/bench-keys'
import { LightSection } from './light-section'
import { LitBox } from './lit-box'
import { useLight } from './use-light'
import { useLightKeys } from './use-light-keys'

beforeEach(() => localStorage.clear())

function Desk({ scale = 0.3, field = 12 }: { scale?: number | null; field?: number }) {
  const light = useLight(7, 'north')
  useLightKeys(true, light, () => {})
  return (
    <>
      <LitBox
        light={light}
        planesUrl={null}
        view="colour"
        size={{ width: 80, height: 60 }}
        geometry={{ pixelScaleArcsec: scale, northAngleDeg: 0, eastLeft: true }}
        closeFieldArcsec={field}
        scrolls={false}
      >
        <img alt="picture" src="/stamp" />
      </LitBox>
      <LightSection light={light} keys />
      <input aria-label="Remark" />
    </>
  )
}
const closer = () => screen.getByAltText('picture').parentElement?.style.transform.replace('none', '') ?? ''
/** Length of the scale bar in hundredths of the box, and what it says. */
const bar = () => {
  const path = document.querySelector('svg path')?.getAttribute('d') ?? ''
  return { length: Number(/H([\d.]+)/.exec(path)?.[1]) - 4, label: document.querySelector('svg text')?.textContent }
}

describe('the field of view', () => {
  it('changes between the whole cutout and the close field with F, and the scale bar follows', async () => {
    render(<Desk />)
    // 80 pixels of 0.3 arcsec are 24 arcsec: 5 arcsec are 20.83 hundredths of it, and 2 of the 12 of the close field 16.67.
    expect(closer()).toBe('')
    expect(bar()).toEqual({ length: expect.closeTo(20.83, 2), label: '5″' })
    await userEvent.keyboard('f')
    expect(closer()).toBe('scale(2)')
    expect(bar()).toEqual({ length: expect.closeTo(16.67, 2), label: '2″' })
    expect(screen.getByText('12″ field')).toBeTruthy()
    await userEvent.keyboard('f')
    expect(closer()).toBe('')
  })

  it('is as large as the recipe says', async () => {
    render(<Desk field={6} />)
    await userEvent.keyboard('f')
    expect(closer()).toBe('scale(4)')
  })

  it('stays whole where the scale is not known or the cutout is smaller, and says so', async () => {
    render(<Desk scale={null} />)
    await userEvent.keyboard('f')
    expect(closer()).toBe('')
    expect(screen.getByText('Whole: its scale is unknown')).toBeTruthy()
    cleanup()
    render(<Desk scale={0.1} />)
    await userEvent.keyboard('f')
    expect(closer()).toBe('')
    expect(screen.getByText('Whole, 8″: no wider than the 12″ field')).toBeTruthy()
  })

  it('is remembered, also of a press of the button', async () => {
    vi.useFakeTimers({ shouldAdvanceTime: true })
    render(<Desk />)
    const button = screen.getByRole('button', { name: /Close field/ })
    await userEvent.setup({ advanceTimers: vi.advanceTimersByTime }).click(button)
    expect(button.getAttribute('aria-pressed')).toBe('true')
    act(() => void vi.advanceTimersByTime(1000))
    vi.useRealTimers()
    cleanup()
    render(<Desk />)
    expect(closer()).toBe('scale(2)')
  })

  it('leaves F to whoever types, and to an open chooser of tags', async () => {
    render(<Desk />)
    await userEvent.type(screen.getByLabelText('Remark'), 'f')
    expect(closer()).toBe('')
    const f = new KeyboardEvent('keydown', { key: 'f', code: 'KeyF' })
    expect(commandOf(f, 'page', 'tags')).toEqual({ do: 'choose', index: 10 })
    expect(commandOf(f, 'page', null)).toEqual({ do: 'light', light: 'field' })
  })
})
