'use client'

import { useEffect, useEffectEvent, useRef, useState, type PointerEvent } from 'react'
import { focusKind } from './bench-keys'
import {
  beginMeasuring,
  moveHeld,
  nearest,
  readingOf,
  withRadius,
  type Measured,
  type Measuring,
  type Place,
  type Tool,
} from './measuring'

const ARROWS: Record<string, Place> = {
  ArrowLeft: { x: -1, y: 0 },
  ArrowRight: { x: 1, y: 0 },
  ArrowUp: { x: 0, y: -1 },
  ArrowDown: { x: 0, y: 1 },
}
const FAST = 10

/**
 * The tool in use and its reading. The arrows move what is held by one pixel of the picture, with Shift by ten; Enter takes hold
 * of the other end; Esc leaves. A pointer anywhere on the picture drags the nearer end by as much as it moves, so that a
 * thumb does not lie on what it measures. Grade keys work as ever.
 */
export function useMeasuring({
  tool,
  picture,
  shown,
  onLeave,
}: {
  tool: Tool | null
  picture: Measured
  /** How many times closer than whole the picture is seen, when the tool is taken up. */
  shown: () => number
  onLeave: () => void
}) {
  const [measuring, setMeasuring] = useState<Measuring | null>(null)
  const [taken, setTaken] = useState<Tool | null>(null)
  if (tool !== taken) {
    setTaken(tool)
    setMeasuring(tool ? beginMeasuring(shown()) : null)
  }

  const pressed = useEffectEvent((event: KeyboardEvent) => {
    const focus = focusKind(event.target)
    if (!tool || event.defaultPrevented || event.ctrlKey || event.altKey || event.metaKey) return
    if (focus === 'text' || document.querySelector('[role="dialog"]')) return
    const arrow = focus === 'slider' ? undefined : ARROWS[event.key]
    const pixels = (event.shiftKey ? FAST : 1) / picture.side
    if (arrow) {
      setMeasuring((now) => now && moveHeld(now, tool, { x: arrow.x * pixels, y: arrow.y * pixels }))
    } else if (event.key === 'Enter' && focus === 'page')
      setMeasuring((now) => now && { ...now, held: now.held ? 0 : 1 })
    else if (event.key === 'Escape') onLeave()
    else return
    event.preventDefault()
  })
  useEffect(() => {
    if (!tool) return
    const down = (event: KeyboardEvent) => pressed(event)
    // Before the bench hears the arrows.
    window.addEventListener('keydown', down, { capture: true })
    return () => window.removeEventListener('keydown', down, { capture: true })
  }, [tool])

  const drag = useRef<{ at: Place; slack: number } | null>(null)
  const pointer = {
    /** @param at the pointer as a place on the picture. */
    down: (event: PointerEvent, at: Place) => {
      if (!tool || !measuring || event.button !== 0 || !event.isPrimary) return
      event.stopPropagation()
      event.currentTarget.setPointerCapture?.(event.pointerId)
      const held = nearest(measuring, tool, at)
      const [first, second] = measuring.places
      drag.current = { at, slack: second.x - first.x - distance(at, first) }
      setMeasuring({ ...measuring, held })
    },
    move: (event: PointerEvent, at: Place) => {
      event.stopPropagation()
      const begun = drag.current
      if (!begun || !tool) return
      const by = { x: at.x - begun.at.x, y: at.y - begun.at.y }
      drag.current = { ...begun, at }
      setMeasuring((now) => {
        if (!now) return now
        const rim = tool === 'circle' && now.held === 1
        return rim ? withRadius(now, distance(at, now.places[0]) + begun.slack) : moveHeld(now, tool, by)
      })
    },
    up: (event: PointerEvent) => {
      event.stopPropagation()
      drag.current = null
    },
  }
  const reading = tool && measuring ? readingOf(measuring, tool, picture) : null
  return { measuring, reading, pointer }
}

const distance = (a: Place, b: Place) => Math.hypot(a.x - b.x, a.y - b.y)
