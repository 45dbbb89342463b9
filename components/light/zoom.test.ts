import { describe, expect, it } from 'vitest'
import { Zoom } from './zoom'

describe('zoom', () => {
  it('goes from the whole picture to 8 times and back in steps', () => {
    const zoom = new Zoom()
    for (let i = 0; i < 9; i++) zoom.step(1)
    expect(zoom.scale).toBe(8)
    for (let i = 0; i < 6; i++) zoom.step(-1)
    expect(zoom.scale).toBe(1)
    expect(zoom.transform).toBe('none')
  })

  it('keeps the place under the pointer where it is', () => {
    const zoom = new Zoom()
    const place = (at: number) => zoom.x + at / zoom.scale
    zoom.by(2, 0.2, 0)
    expect(place(0.2)).toBeCloseTo(0.2, 12)
    const before = place(-0.3)
    zoom.by(1.7, -0.3, 0)
    expect(place(-0.3)).toBeCloseTo(before, 12)
  })

  it('never shows what lies outside the picture', () => {
    const zoom = new Zoom()
    zoom.pan(3, -3)
    expect([zoom.x, zoom.y]).toEqual([0, 0])
    zoom.by(4)
    zoom.pan(50, -50)
    expect([zoom.x, zoom.y]).toEqual([0.375, -0.375])
    zoom.by(0.5)
    expect([zoom.x, zoom.y]).toEqual([0.25, -0.25])
    zoom.reset()
    expect([zoom.scale, zoom.x, zoom.y]).toEqual([1, 0, 0])
  })
})
