'use client'

import { lazy, Suspense, useEffect } from 'react'
import { letGo } from '@/components/bench/let-go'
import { KeyCap } from '@/components/ui/key-cap'
import { stepsOf } from './held-keys'
import type { LightStore } from './light-store'
import { useClose, useLightFact, useZoomScale } from './use-light'

const LightPanel = lazy(() => import('./light-panel'))

/** The head of Light, always there; its panel comes when it is opened. */
export function LightSection({
  light,
  keys,
  className = '',
}: {
  light: LightStore
  keys: boolean
  className?: string
}) {
  const open = useLightFact(light, (now) => now.open)
  const touched = useLightFact(light, (now) => now.touched)
  const close = useClose(light)
  const zoomed = useZoomScale(light) > 1
  return (
    <section aria-label="Light" className={`@container flex flex-col gap-1.5 ${className}`}>
      <div className="flex min-h-9 items-center justify-between gap-3 md:min-h-6">
        <button
          type="button"
          aria-expanded={open}
          onClick={letGo(() => light.setOpen(!open))}
          className="-mx-2 flex min-h-11 items-center gap-2 px-2 text-note font-semibold text-mute hover:text-text md:min-h-6 pointer-coarse:min-h-11"
        >
          {keys ? (
            <span className="hidden md:inline">
              <KeyCap>L</KeyCap>
            </span>
          ) : null}
          Light
          {touched ? <span className="font-normal text-text @max-[18rem]:hidden">changed</span> : null}
        </button>
        <button
          type="button"
          aria-pressed={close}
          onClick={letGo(() => light.setClose(!close))}
          className="-mr-2 ml-auto flex min-h-11 items-center gap-2 px-2 text-note text-mute hover:text-text aria-pressed:text-text md:min-h-6 pointer-coarse:min-h-11"
        >
          {keys ? (
            <span className="hidden md:inline">
              <KeyCap>F</KeyCap>
            </span>
          ) : null}
          Close field
        </button>
        {touched || zoomed ? (
          <button
            type="button"
            onClick={letGo(() => light.reset())}
            className="-mr-2 flex min-h-11 items-center gap-2 px-2 text-note text-mute hover:text-text md:min-h-6 pointer-coarse:min-h-11"
          >
            {keys ? (
              <span className="hidden md:inline">
                <KeyCap>0</KeyCap>
              </span>
            ) : null}
            Reset
          </button>
        ) : null}
      </div>
      {open ? (
        <Suspense fallback={<Opening light={light} />}>
          <LightPanel light={light} />
        </Suspense>
      ) : null}
    </section>
  )
}

/** Whoever opened Light by key goes on with the arrows at once: they are kept for the slider that is to have the focus. */
function Opening({ light }: { light: LightStore }) {
  useEffect(() => {
    const hold = (event: KeyboardEvent) => {
      const steps = stepsOf(event)
      if (steps === 0 || !light.hold(steps)) return
      event.preventDefault()
      event.stopPropagation()
    }
    window.addEventListener('keydown', hold, true)
    return () => window.removeEventListener('keydown', hold, true)
  }, [light])
  return <p className="text-note text-mute">Opening …</p>
}
