'use client'

import type { KeyboardEvent } from 'react'
import { offsetOfStep } from '@/lib/science/imaging/sky-on-stamp'
import type { SkyVector } from '@/lib/science/lensing/sis'
import { deletePoint, movePoint, setPoint } from './desk-state'
import type { DeskStore } from './desk-store'
import type { Frame } from './frame'
import { nudgeGrip, type Arrow } from './move-lens'

const ARROWS: Record<string, Arrow> = {
  ArrowLeft: { right: -1, up: 0 },
  ArrowRight: { right: 1, up: 0 },
  ArrowUp: { right: 0, up: 1 },
  ArrowDown: { right: 0, up: -1 },
}
/** Pixels of the picture that an arrow key moves something; ten times that with Shift. */
const STEP = 0.5
const FAST = 10

/**
 * Keys over the picture: arrows move the cross, the point in focus or what is held of the model; Enter sets a point where the cross is;
 * Delete takes the chosen one away; Ctrl Z undoes; Escape leaves.
 */
export function useStageKeys(desk: DeskStore, frame: Frame | null, onUsed: () => void) {
  return (event: KeyboardEvent<HTMLElement>) => {
    const state = desk.get()
    if (!frame || event.altKey) return
    const done = () => {
      event.preventDefault()
      event.stopPropagation()
      onUsed()
    }
    if (event.key.toLowerCase() === 'z' && (event.ctrlKey || event.metaKey) && !event.shiftKey) {
      desk.undo()
      return done()
    }
    if (event.ctrlKey || event.metaKey) return
    if (event.key === 'Escape') {
      desk.close()
      return done()
    }
    if (state.opened) return
    const setsPoints = state.mode === 'arc' || state.marking
    const focused = Number((event.target as HTMLElement).dataset?.point ?? Number.NaN)
    const arrow = ARROWS[event.key]
    if (arrow) {
      const times = event.shiftKey ? FAST : 1
      const move = ({ right, up }: Arrow): SkyVector =>
        offsetOfStep({ right: right * STEP * times, down: -up * STEP * times }, frame.geometry)
      if (!setsPoints) {
        const stepArcsec = STEP * (frame.geometry.pixelScaleArcsec ?? 0)
        desk.act({ model: nudgeGrip(state.model, state.grip, arrow, { move, stepArcsec, times }), fit: null })
      } else if (Number.isInteger(focused) && state.points[focused])
        desk.act(movePoint(state, focused, plus(state.points[focused], move(arrow))))
      else desk.moveCross(plus(state.cross, move(arrow)))
      return done()
    }
    if (!setsPoints) return
    if (event.key === 'Enter' || event.key === ' ') {
      if (Number.isInteger(focused)) desk.set({ chosen: focused })
      else desk.act(setPoint(state, state.cross))
      return done()
    }
    if (event.key === 'Delete' || event.key === 'Backspace') {
      const which = Number.isInteger(focused) ? focused : state.chosen
      if (which === null || !state.points[which]) return
      desk.act(deletePoint(state, which))
      done()
    }
  }
}

const plus = (a: SkyVector, b: SkyVector): SkyVector => ({ east: a.east + b.east, north: a.north + b.north })
