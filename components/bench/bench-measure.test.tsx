import { fireEvent, screen } from '@testing-library/react'
import { describe, expect, it, vi } from 'vitest'
import { freshRoom, look, name, open } from './_bench-room'

freshRoom()

/** What stands below the picture. */
const reading = () => document.querySelector('figcaption [role="status"]')?.textContent
const layer = () => document.querySelector<HTMLElement>('[data-tool]')

describe('ruler and circle', () => {
  it('measure by key in arcseconds and degrees east of north: an arrow moves one pixel, with Shift ten', async () => {
    const { user } = await open()
    await user.keyboard('r')
    expect(reading()).toBe('2.88″, 90° east of north')
    await user.keyboard('{ArrowRight}')
    expect(reading()).toBe('3.08″, 90° east of north')
    await user.keyboard('{Shift>}{ArrowRight}{/Shift}')
    expect(reading()).toBe('5.08″, 90° east of north')
    await user.keyboard('{Enter}{ArrowLeft}')
    expect(reading()).toBe('5.28″, 90° east of north')
    expect(
      screen.getByRole('button', { name: /^View 1/, pressed: true }),
      'the arrows change no view',
    ).toBeInTheDocument()
  })

  it('leave with Esc, with their key and by their button, after which the arrows change the view again', async () => {
    const { user } = await open()
    await user.keyboard('r{Escape}')
    expect(layer()).toBeNull()
    await user.keyboard('oo')
    expect(layer()).toBeNull()
    const button = screen.getByRole('button', { name: /Circle/ })
    await user.click(button)
    expect(button).toHaveAttribute('aria-pressed', 'true')
    expect(reading()).toBe('Radius 2.88″, centre 10ʰ00ᵐ24.00ˢ −02°12′00.0″')
    await user.click(button)
    expect(layer()).toBeNull()
    await user.keyboard('{ArrowRight}')
    expect(screen.getByRole('button', { name: /^View 2/, pressed: true })).toBeInTheDocument()
  })

  it('leave the grade keys alone and end with the candidate', async () => {
    const { user } = await open()
    await user.keyboard('rb')
    expect(name()).toBe('SWS-2')
    expect(layer()).toBeNull()
    await look()
    await user.keyboard('r')
    expect(reading()).toBe('2.88″, 90° east of north')
  })

  it('are dragged anywhere by a pointer, by as much as it moves, and change or blink no view meanwhile', async () => {
    const { user } = await open()
    await user.keyboard('r')
    const box = layer()!
    vi.spyOn(box, 'getBoundingClientRect').mockReturnValue(new DOMRect(0, 0, 800, 800))
    const at = { button: 0, isPrimary: true, pointerId: 1 }
    fireEvent.pointerDown(box, { ...at, clientX: 700, clientY: 600 })
    fireEvent.pointerMove(box, { ...at, clientX: 700, clientY: 400 })
    fireEvent.pointerUp(box, at)
    // The end at 144 px from the middle goes 200 px up: hypot(144, 200) / 10 pixels of 0.2 arcsec.
    expect(reading()).toBe('4.93″, 144° east of north')
    expect(screen.getByRole('button', { name: /^View 1/, pressed: true })).toBeInTheDocument()
    fireEvent.pointerMove(box, { ...at, clientX: 10, clientY: 10 })
    expect(reading(), 'let go').toBe('4.93″, 144° east of north')
  })

  it('widen a circle by its edge', async () => {
    const { user } = await open()
    await user.keyboard('o')
    const box = layer()!
    vi.spyOn(box, 'getBoundingClientRect').mockReturnValue(new DOMRect(0, 0, 800, 800))
    const at = { button: 0, isPrimary: true, pointerId: 1 }
    fireEvent.pointerDown(box, { ...at, clientX: 400, clientY: 256 })
    fireEvent.pointerMove(box, { ...at, clientX: 400, clientY: 200 })
    fireEvent.pointerUp(box, at)
    expect(reading()).toMatch(/^Radius 4\.00″/)
  })

  it('do nothing for somebody who types', async () => {
    const { user } = await open()
    await user.keyboard('rm')
    await user.keyboard('{ArrowRight}r')
    expect(reading()).toBe('2.88″, 90° east of north')
    expect(screen.getByRole('textbox')).toHaveValue('r')
  })
})
