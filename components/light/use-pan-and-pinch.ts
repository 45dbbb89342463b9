'use client'

import { useEffect, type RefObject } from 'react'
import type { LightStore } from './light-store'

const WHEEL = 0.002

/**
 * Wheel, drag and two fingers on the box: closer, farther and about. While the picture is whole one pointer is left to others
 * (blinking, sweeping); once it is close a drag moves it and nothing else hears of it.
 */
export function usePanAndPinch(box: RefObject<HTMLElement | null>, light: LightStore): void {
  useEffect(() => {
    const element = box.current
    if (!element) return
    const { zoom } = light
    const pointers = new Map<number, { x: number; y: number }>()
    let apart = 0
    const place = (x: number, y: number) => {
      const { left, top, width, height } = element.getBoundingClientRect()
      return { x: (x - left) / width - 0.5, y: (y - top) / height - 0.5, width, height }
    }
    const spread = () => {
      const [a, b] = [...pointers.values()]
      return { length: Math.hypot(a.x - b.x, a.y - b.y), x: (a.x + b.x) / 2, y: (a.y + b.y) / 2 }
    }

    const wheel = (event: WheelEvent) => {
      // A page that scrolls keeps its wheel until Light is open.
      if (!event.ctrlKey && !light.open && zoom.scale === 1) return
      event.preventDefault()
      const { x, y } = place(event.clientX, event.clientY)
      zoom.by(Math.exp(-event.deltaY * WHEEL * (event.ctrlKey ? 4 : 1)), x, y)
    }
    const down = (event: PointerEvent) => {
      if (event.button !== 0) return
      pointers.set(event.pointerId, { x: event.clientX, y: event.clientY })
      if (pointers.size === 2) {
        // The first finger was taken for a hold.
        element.dispatchEvent(new PointerEvent('pointercancel', { bubbles: true }))
        apart = spread().length
      }
      if (pointers.size === 2 || zoom.scale > 1) event.stopPropagation()
      if (zoom.scale > 1) element.setPointerCapture?.(event.pointerId)
    }
    const move = (event: PointerEvent) => {
      const before = pointers.get(event.pointerId)
      if (!before) return
      pointers.set(event.pointerId, { x: event.clientX, y: event.clientY })
      if (pointers.size === 2) {
        const { length, x, y } = spread()
        const at = place(x, y)
        if (apart > 0 && length > 0) zoom.by(length / apart, at.x, at.y)
        apart = length
      }
      if (zoom.scale > 1 && pointers.size <= 2) {
        const { width, height } = element.getBoundingClientRect()
        const share = 1 / pointers.size
        zoom.pan((-(event.clientX - before.x) / width) * share, (-(event.clientY - before.y) / height) * share)
      }
      if (pointers.size === 2 || zoom.scale > 1) event.stopPropagation()
    }
    const up = (event: PointerEvent) => {
      pointers.delete(event.pointerId)
    }

    element.addEventListener('wheel', wheel, { passive: false })
    element.addEventListener('pointerdown', down)
    element.addEventListener('pointermove', move)
    element.addEventListener('pointerup', up)
    element.addEventListener('pointercancel', up)
    return () => {
      element.removeEventListener('wheel', wheel)
      element.removeEventListener('pointerdown', down)
      element.removeEventListener('pointermove', move)
      element.removeEventListener('pointerup', up)
      element.removeEventListener('pointercancel', up)
    }
  }, [box, light])
}
