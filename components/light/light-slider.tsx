'use client'

import { useEffect, useId, useRef } from 'react'
import { moveWhenDrawn, stepsOf } from './held-keys'
import type { LightStore } from './light-store'
import { STEPS, type SliderScale } from './slider-scales'

/** A thin line and a round handle, the same in every browser; the whole height takes the finger. */
const SLIDER = [
  'h-10 w-full touch-none cursor-pointer appearance-none rounded-key bg-transparent aria-disabled:opacity-40 md:h-6',
  'pointer-coarse:h-10',
  '[&::-webkit-slider-runnable-track]:h-0.5 [&::-webkit-slider-runnable-track]:bg-edge',
  '[&::-webkit-slider-thumb]:-mt-[9px] [&::-webkit-slider-thumb]:size-5 [&::-webkit-slider-thumb]:appearance-none',
  '[&::-webkit-slider-thumb]:rounded-full [&::-webkit-slider-thumb]:bg-text',
  'md:[&::-webkit-slider-thumb]:-mt-1.5 md:[&::-webkit-slider-thumb]:size-3.5',
  '[&::-moz-range-track]:h-0.5 [&::-moz-range-track]:bg-edge [&::-moz-range-thumb]:size-4',
  '[&::-moz-range-thumb]:border-0 [&::-moz-range-thumb]:bg-text',
].join(' ')

/**
 * A slider that writes into Light and follows it without being rendered: place and figure are set on the elements themselves.
 * Arrow keys and all other keys of a slider are the browser's own; pressed before there is a picture, they move it when it comes.
 */
export function LightSlider({
  light,
  label,
  scale,
  read,
  write,
}: {
  light: LightStore
  label: string
  scale: SliderScale
  /** null: nothing to set now. */
  read: (light: LightStore) => number | null
  write: (light: LightStore, value: number) => void
}) {
  const id = useId()
  const input = useRef<HTMLInputElement>(null)
  const figure = useRef<HTMLOutputElement>(null)
  useEffect(() => {
    const follow = () => {
      if (!input.current || !figure.current) return
      const value = read(light)
      const text = value === null ? '–' : scale.figure(value)
      if (figure.current.textContent === text) return
      figure.current.textContent = text
      // Not `disabled`, which would drop the focus of whoever opens Light before the pixels are here.
      input.current.setAttribute('aria-disabled', String(value === null))
      input.current.setAttribute('aria-valuetext', text)
      if (value !== null) input.current.value = String(scale.place(value))
    }
    follow()
    return light.subscribe(follow)
  }, [light, scale, read])
  return (
    <div className="grid grid-cols-[5rem_minmax(0,1fr)_3.5rem] items-center gap-2">
      <label htmlFor={id} className="truncate text-small">
        {label}
      </label>
      <input
        ref={input}
        id={id}
        type="range"
        min={0}
        max={STEPS}
        defaultValue={0}
        onKeyDown={(event) => {
          const steps = stepsOf(event)
          if (steps === 0 || read(light) !== null) return
          event.preventDefault()
          moveWhenDrawn(light, scale, read, write, steps)
        }}
        onInput={(event) => {
          if (read(light) !== null) write(light, scale.value(Number(event.currentTarget.value)))
        }}
        className={SLIDER}
      />
      <output ref={figure} htmlFor={id} className="figures text-right text-note text-mute" />
    </div>
  )
}
