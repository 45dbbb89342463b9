import { useRef, type PointerEvent } from 'react'

const HOLD_MS = 180
const SWEEP_PIXELS = 40

/** Pointer handlers: held still it blinks until let go; moved sideways it sweeps once. */
export function useHoldAndSwipe(onBlink: (on: boolean) => void, onSweep: (step: 1 | -1) => void) {
  const start = useRef<{ x: number; timer: ReturnType<typeof setTimeout>; blinking: boolean } | null>(null)
  const end = () => {
    if (!start.current) return
    clearTimeout(start.current.timer)
    if (start.current.blinking) onBlink(false)
    start.current = null
  }
  return {
    onPointerDown: (event: PointerEvent) => {
      if (event.button !== 0 || !event.isPrimary) return
      const timer = setTimeout(() => {
        if (start.current) start.current.blinking = true
        onBlink(true)
      }, HOLD_MS)
      start.current = { x: event.clientX, timer, blinking: false }
    },
    onPointerMove: (event: PointerEvent) => {
      const held = start.current
      if (!held || held.blinking || Math.abs(event.clientX - held.x) < SWEEP_PIXELS) return
      const step = event.clientX < held.x ? 1 : -1
      end()
      onSweep(step)
    },
    onPointerUp: end,
    onPointerCancel: end,
    onPointerLeave: end,
    onContextMenu: (event: { preventDefault(): void }) => event.preventDefault(),
  }
}
