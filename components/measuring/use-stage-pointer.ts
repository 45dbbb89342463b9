'use client'

import { useRef, type PointerEvent } from 'react'
import type { LightStore } from '@/components/light/light-store'
import { movePoint, setPoint } from './desk-state'
import type { DeskStore } from './desk-store'
import { offsetOf, spotOf, type Frame, type Spot } from './frame'
import { dragGrip, handlesOf, type Grip, type LensAndSource } from './move-lens'
import type { SkyVector } from '@/lib/science/lensing/sis'

/** Pixels on the screen within which a press means a mark that is there, for a mouse and for a finger. */
const NEAR = { fine: 12, coarse: 22 }
/** A press that moves less sets a point where it was. */
const STILL = 5

type Gesture =
  | { kind: 'press'; x: number; y: number; moved: boolean }
  | { kind: 'point'; which: number; start: SkyVector; from: SkyVector; begun: boolean; x: number; y: number }
  | { kind: 'grip'; grip: Grip; start: LensAndSource; from: SkyVector; begun: boolean }

/**
 * Mouse, pen and fingers over the picture of somebody who measures: a press sets a point or takes hold of one; with a model a drag
 * anywhere moves what is held; two fingers bring the picture closer.
 */
export function useStagePointer(desk: DeskStore, light: LightStore, frame: Frame | null) {
  const gesture = useRef<Gesture | null>(null)
  const fingers = useRef(new Map<number, { x: number; y: number }>())
  const spread = useRef(0)

  const boxOf = (event: PointerEvent) => event.currentTarget.getBoundingClientRect()
  const placeOf = (event: PointerEvent): Spot => {
    const { left, top, width, height } = boxOf(event)
    return { x: (100 * (event.clientX - left)) / (width || 1), y: (100 * (event.clientY - top)) / (height || 1) }
  }
  /** In pixels of the screen. */
  const apart = (event: PointerEvent, offset: SkyVector, now: Frame): number => {
    const [at, spot] = [placeOf(event), spotOf(offset, now)]
    return (Math.hypot(at.x - spot.x, at.y - spot.y) / 100) * boxOf(event).width
  }
  const nearest = (event: PointerEvent, offsets: readonly SkyVector[], now: Frame): number | null => {
    const reach = event.pointerType === 'mouse' ? NEAR.fine : NEAR.coarse
    let best: { which: number; distance: number } | null = null
    for (const [which, offset] of offsets.entries()) {
      const distance = apart(event, offset, now)
      if (distance <= reach && (best === null || distance < best.distance)) best = { which, distance }
    }
    return best?.which ?? null
  }

  const down = (event: PointerEvent) => {
    if (!frame || event.button !== 0) return
    event.stopPropagation()
    event.currentTarget.setPointerCapture?.(event.pointerId)
    fingers.current.set(event.pointerId, { x: event.clientX, y: event.clientY })
    if (fingers.current.size === 2) {
      gesture.current = null
      spread.current = lengthOf(fingers.current)
      return
    }
    const state = desk.get()
    const from = offsetOf(placeOf(event), frame)
    const press: Gesture = { kind: 'press', x: event.clientX, y: event.clientY, moved: false }
    if (state.opened) gesture.current = press
    else if (state.mode === 'arc' || state.marking) {
      const which = nearest(event, state.points, frame)
      if (which === null) gesture.current = press
      else {
        const { clientX: x, clientY: y } = event
        gesture.current = { kind: 'point', which, start: state.points[which], from, begun: false, x, y }
        desk.set({ chosen: which })
      }
    } else {
      const grips = handlesOf(state.model)
      const order = [state.grip, 'source', 'lens', 'size', 'shape', 'shear'] satisfies Grip[]
      const which = nearest(
        event,
        order.map((one) => grips[one]),
        frame,
      )
      const grip = which === null ? state.grip : order[which]
      gesture.current = { kind: 'grip', grip, start: state.model, from, begun: false }
      if (grip !== state.grip) desk.set({ grip })
    }
  }

  const move = (event: PointerEvent) => {
    event.stopPropagation()
    const before = fingers.current.get(event.pointerId)
    if (!frame || !before) return
    fingers.current.set(event.pointerId, { x: event.clientX, y: event.clientY })
    if (fingers.current.size === 2) return pinch(event, before)
    const held = gesture.current
    if (!held) return
    const to = offsetOf(placeOf(event), frame)
    if (held.kind === 'press') {
      if (Math.hypot(event.clientX - held.x, event.clientY - held.y) > STILL) held.moved = true
      if (held.moved && light.zoom.scale > 1) pan(event, before)
    } else if (held.kind === 'point') {
      if (!held.begun && Math.hypot(event.clientX - held.x, event.clientY - held.y) < STILL / 2) return
      begin(held)
      const { start, from } = held
      const place = { east: start.east + to.east - from.east, north: start.north + to.north - from.north }
      desk.set(movePoint(desk.get(), held.which, place))
    } else {
      begin(held)
      desk.set({ model: dragGrip(held.start, held.grip, held.from, to), fit: null })
    }
  }
  const begin = (held: { begun: boolean }) => {
    if (held.begun) return
    held.begun = true
    desk.begin()
  }
  const pan = (event: PointerEvent, before: { x: number; y: number }, share = 1) => {
    const { width, height } = boxOf(event)
    light.zoom.pan((-(event.clientX - before.x) / width) * share, (-(event.clientY - before.y) / height) * share)
  }
  const pinch = (event: PointerEvent, before: { x: number; y: number }) => {
    const now = lengthOf(fingers.current)
    const { left, top, width, height } = boxOf(event)
    const all = [...fingers.current.values()]
    const x = all.reduce((sum, one) => sum + one.x, 0) / all.length
    const y = all.reduce((sum, one) => sum + one.y, 0) / all.length
    if (spread.current > 0 && now > 0)
      light.zoom.by(now / spread.current, (x - left) / width - 0.5, (y - top) / height - 0.5)
    spread.current = now
    if (light.zoom.scale > 1) pan(event, before, 0.5)
  }

  const up = (event: PointerEvent) => {
    event.stopPropagation()
    const held = gesture.current
    fingers.current.delete(event.pointerId)
    gesture.current = null
    const state = desk.get()
    if (!frame || held?.kind !== 'press' || held.moved || state.opened) return
    desk.act(setPoint(state, offsetOf(placeOf(event), frame)))
  }
  const cancel = (event: PointerEvent) => {
    fingers.current.delete(event.pointerId)
    gesture.current = null
  }
  return { onPointerDown: down, onPointerMove: move, onPointerUp: up, onPointerCancel: cancel }
}

function lengthOf(fingers: ReadonlyMap<number, { x: number; y: number }>): number {
  const [a, b] = [...fingers.values()]
  return a && b ? Math.hypot(a.x - b.x, a.y - b.y) : 0
}
