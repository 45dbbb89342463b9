'use client'

import { useCallback, useEffect, useRef, type ReactNode } from 'react'
import { letGo } from '@/components/bench/let-go'
import type { Curve } from '@/lib/science/imaging/draw-sheet'
import { moveWhenDrawn } from './held-keys'
import { LightSlider } from './light-slider'
import type { LightStore } from './light-store'
import type { Limit } from './light-settings'
import { BLACK_SCALE, SOFTENING_SCALE, WEIGHT_SCALE, WHITE_SCALE } from './slider-scales'
import { useLightFact, useZoomScale } from './use-light'

const CURVE_LABELS: { curve: Curve; label: string; title: string }[] = [
  { curve: 'asinh', label: 'asinh', title: 'asinh: straight below the softening, logarithmic above' },
  { curve: 'log', label: 'log', title: 'Logarithm, from the softening on' },
  { curve: 'sqrt', label: '√', title: 'Square root' },
  { curve: 'linear', label: 'linear', title: 'Straight' },
]

/** A limit of the view that is drawn: the person's own, else the recipe's. */
const readLimit = (limit: Limit) => (light: LightStore) =>
  light.drawn && (light.limitsOf(light.drawn.view)[limit] ?? light.drawn.own[limit])
const writeLimit = (limit: Limit) => (light: LightStore, value: number) => {
  if (light.drawn) light.setLimit(light.drawn.view, limit, value)
}
const readBlack = readLimit('black')
const readWhite = readLimit('white')
const readAnySoftening = readLimit('softening')
/** Square root and straight have none. */
const readSoftening = (light: LightStore) =>
  light.settings.curve === 'asinh' || light.settings.curve === 'log' ? readAnySoftening(light) : null
const writeBlack = writeLimit('black')
const writeWhite = writeLimit('white')
const writeSoftening = writeLimit('softening')

/** Live contrast by hand. Everything works by keyboard: arrows on the sliders, 0 for the recipe's own picture. */
export default function LightPanel({ light }: { light: LightStore }) {
  const root = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (light.takeFocus()) root.current?.querySelector('input')?.focus()
    for (const steps of light.takeHeld()) moveWhenDrawn(light, BLACK_SCALE, readBlack, writeBlack, steps)
  }, [light])
  const curve = useLightFact(light, (now) => now.settings.curve)
  const invert = useLightFact(light, (now) => now.settings.invert)
  const keep = useLightFact(light, (now) => now.keep)
  const bands = useLightFact(light, (now) => (now.drawn?.colour ? now.drawn.bands.join('\n') : ''))
  return (
    <div ref={root} className="grid gap-x-6 gap-y-1.5 @lg:grid-cols-2">
      <Status light={light} />
      <div className="flex flex-col md:gap-1.5">
        <LightSlider light={light} label="Black" scale={BLACK_SCALE} read={readBlack} write={writeBlack} />
        <LightSlider light={light} label="White" scale={WHITE_SCALE} read={readWhite} write={writeWhite} />
        <LightSlider
          light={light}
          label="Softening"
          scale={SOFTENING_SCALE}
          read={readSoftening}
          write={writeSoftening}
        />
      </div>
      <div className="flex flex-col gap-1.5">
        <div className="grid grid-cols-8 gap-1 md:grid-cols-4">
          <div role="group" aria-label="Stretch" className="contents">
            {CURVE_LABELS.map((one) => (
              <Toggle
                key={one.curve}
                on={curve === one.curve}
                title={one.title}
                onPress={() => light.change({ curve: one.curve })}
              >
                {one.label}
              </Toggle>
            ))}
          </div>
          <Toggle on={invert} title="Dark on light" onPress={() => light.change({ invert: !invert })}>
            Invert
          </Toggle>
          <ZoomButtons light={light} />
        </div>
        <div className="grid gap-x-3 @xs:grid-cols-2">
          <label className="flex min-h-9 items-center gap-2 text-note text-mute md:min-h-6 pointer-coarse:min-h-9">
            <input
              type="checkbox"
              checked={keep}
              onChange={(event) => light.setKeep(event.target.checked)}
              className="size-4 accent-text pointer-coarse:size-5"
            />
            Keep for the next ones
          </label>
          {bands === '' ? null : (
            <details className="group text-small @xs:open:col-span-2">
              <summary className="flex min-h-9 list-none items-center text-note text-mute hover:text-text md:min-h-6 pointer-coarse:min-h-9">
                <span aria-hidden="true" className="mr-1.5 group-open:rotate-90">
                  ▸
                </span>
                Weights of the bands
              </summary>
              {bands.split('\n').map((band) => (
                <BandWeight key={band} light={light} band={band} />
              ))}
            </details>
          )}
        </div>
      </div>
    </div>
  )
}

function BandWeight({ light, band }: { light: LightStore; band: string }) {
  const read = useCallback((now: LightStore) => now.settings.weights[band] ?? 1, [band])
  const write = (now: LightStore, value: number) => now.change({ weights: { ...now.settings.weights, [band]: value } })
  return <LightSlider light={light} label={band} scale={WEIGHT_SCALE} read={read} write={write} />
}

/** Why the sliders have nothing to work on. */
function Status({ light }: { light: LightStore }) {
  const text = useLightFact(light, ({ status }) => {
    if (typeof status === 'object') return `No live contrast: ${status.failed}`
    if (status === 'still') return 'This view stays as it is: it cannot be drawn from these pixels.'
    return status === 'waiting' ? 'Fetching the pixels …' : ''
  })
  return (
    <p role="status" className={text === '' ? 'sr-only' : 'text-note text-mute @lg:col-span-2'}>
      {text}
    </p>
  )
}

function ZoomButtons({ light }: { light: LightStore }) {
  const scale = useZoomScale(light)
  return (
    <>
      <Toggle label="Farther" title="Farther (-)" onPress={() => light.zoom.step(-1)}>
        −
      </Toggle>
      <span role="status" aria-label="Zoom" className="figures grid place-items-center text-note text-mute">
        {Number(scale.toFixed(1))}×
      </span>
      <Toggle label="Closer" title="Closer (+)" onPress={() => light.zoom.step(1)}>
        +
      </Toggle>
    </>
  )
}

function Toggle({
  on,
  label,
  title,
  onPress,
  children,
}: {
  /** Left out: a plain button. */
  on?: boolean
  label?: string
  title: string
  onPress: () => void
  children: ReactNode
}) {
  return (
    <button
      type="button"
      aria-pressed={on}
      aria-label={label}
      title={title}
      onClick={letGo(onPress)}
      className={`min-h-11 touch-manipulation rounded-key border px-1 text-note md:min-h-7 pointer-coarse:min-h-11 ${
        on ? 'border-text bg-raise text-text' : 'border-line text-mute hover:border-edge hover:text-text'
      }`}
    >
      {children}
    </button>
  )
}
