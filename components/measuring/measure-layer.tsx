'use client'

import { useEffect, useRef, useState } from 'react'
import type { LightStore } from '@/components/light/light-store'
import type { SkyVector } from '@/lib/science/lensing/sis'
import type { MeasurementShown } from '@/lib/work/measuring/measurement-shown'
import type { PictureView } from '@/lib/work/stamps/candidate-pictures'
import { circleCurve, CurveMarks, KeptMarks } from './curve-marks'
import type { DeskStore } from './desk-store'
import type { DeskState } from './desk-state'
import { curveNow } from './fit-now'
import { spotOf, type Frame } from './frame'
import { withError } from './in-figures'
import { Cross, Label, PointMarks } from './marks'
import { ModelCurves, ModelHandles } from './model-marks'
import { useDesk, useFrame } from './use-desk'
import { useStageKeys } from './use-stage-keys'
import { useStagePointer } from './use-stage-pointer'

/** Over the picture: what is measured now and what is kept and shown, following field of view and zoom. */
export function MeasureLayer({
  desk,
  light,
  view,
  closeFieldArcsec,
  shown,
}: {
  desk: DeskStore
  light: LightStore
  view: PictureView
  closeFieldArcsec: number
  /** Kept measurements that are to be seen. */
  shown: readonly MeasurementShown[]
}) {
  const state = useDesk(desk)
  const frame = useFrame(light, view, closeFieldArcsec, state.wide)
  if (!frame) return null
  const kept = state.opened ? [state.opened] : shown
  const marks = kept.map((one) => <KeptMarks key={one.id} kept={one} frame={frame} />)
  if (state.mode === 'off') return <Drawing>{marks}</Drawing>
  return (
    <Stage desk={desk} light={light} state={state} frame={frame}>
      {marks}
      {state.opened ? null : <OnDesk state={state} frame={frame} />}
    </Stage>
  )
}

function Drawing({ children }: { children: React.ReactNode }) {
  return (
    <svg viewBox="0 0 100 100" className="pointer-events-none absolute inset-0 size-full" aria-hidden="true">
      {children}
    </svg>
  )
}

function OnDesk({ state, frame }: { state: DeskState; frame: Frame }) {
  if (state.mode === 'model') {
    return (
      <>
        <Reading text={`${state.model.lens.einsteinRadiusArcsec.toFixed(2)}″`} />
        {state.drawn === 'nothing' ? null : (
          <ModelCurves
            model={state.model}
            sourceRadiusArcsec={state.sourceRadiusArcsec}
            frame={frame}
            arcsOnly={state.drawn === 'arcs'}
          />
        )}
        {state.marking || state.drawn !== 'all' ? null : (
          <ModelHandles model={state.model} grip={state.grip} frame={frame} />
        )}
        {state.drawn === 'all' ? (
          <PointMarks points={state.points} chosen={state.marking ? state.chosen : null} frame={frame} />
        ) : null}
      </>
    )
  }
  const now = curveNow(state, frame.geometry.pixelScaleArcsec ?? Number.NaN)
  const fitted = 'fitted' in now ? now.fitted : null
  const curve = fitted?.kind === 'circle' ? circleCurve(fitted.centre, fitted.radiusArcsec) : fitted
  return (
    <>
      {curve ? <CurveMarks curve={curve} frame={frame} /> : null}
      {'fitted' in now ? <Reading text={withError(now.radiusArcsec, now.errorArcsec, '″')} /> : null}
      <PointMarks points={state.points} chosen={state.chosen} frame={frame} />
    </>
  )
}

/** The radius on the picture itself, for where the panel is out of sight. */
function Reading({ text }: { text: string }) {
  return <Label at={{ x: 50, y: 4 }} text={text} size={4} />
}

/** Takes presses and keys. The points are buttons in it, so that each can be reached and moved by keyboard. */
function Stage({
  desk,
  light,
  state,
  frame,
  children,
}: {
  desk: DeskStore
  light: LightStore
  state: DeskState
  frame: Frame
  children: React.ReactNode
}) {
  const box = useRef<HTMLDivElement>(null)
  const [byKey, setByKey] = useState(false)
  const pointer = useStagePointer(desk, light, frame)
  const onKeyDown = useStageKeys(desk, frame, () => setByKey(true))
  const setsPoints = !state.opened && (state.mode === 'arc' || state.marking)
  useEffect(() => {
    box.current?.focus({ preventScroll: true })
  }, [state.mode, state.marking])
  const { opened } = state
  // Picture and panel begin at the same height; both are brought into sight.
  useEffect(() => {
    box.current?.closest('[data-desk]')?.scrollIntoView?.({ block: 'start' })
  }, [opened])
  useEffect(() => {
    const element = box.current
    const wheel = (event: WheelEvent) => {
      event.preventDefault()
      const { left, top, width, height } = element!.getBoundingClientRect()
      const factor = Math.exp(-event.deltaY * 0.002 * (event.ctrlKey ? 4 : 1))
      light.zoom.by(factor, (event.clientX - left) / width - 0.5, (event.clientY - top) / height - 0.5)
    }
    element?.addEventListener('wheel', wheel, { passive: false })
    return () => element?.removeEventListener('wheel', wheel)
  }, [light])
  return (
    <div
      ref={box}
      role="application"
      tabIndex={0}
      aria-label={labelOf(state, setsPoints)}
      data-measuring={state.mode}
      {...pointer}
      onPointerDown={(event) => {
        setByKey(false)
        pointer.onPointerDown(event)
      }}
      onKeyDown={onKeyDown}
      className={`absolute inset-0 touch-none outline-offset-[-2px] ${setsPoints ? 'cursor-crosshair' : state.opened ? '' : 'cursor-move'}`}
    >
      <Drawing>
        {children}
        {setsPoints && byKey ? <Cross at={spotOf(state.cross, frame)} strong /> : null}
      </Drawing>
      {setsPoints
        ? state.points.map((point, k) => (
            <PointButton key={k} which={k} point={point} frame={frame} chosen={k === state.chosen} />
          ))
        : null}
    </div>
  )
}

function labelOf(state: DeskState, setsPoints: boolean): string {
  if (state.opened) return 'A kept measurement over the picture. Escape leaves.'
  if (setsPoints)
    return 'Points over the picture: arrow keys move the cross, Enter sets a point, Delete takes one away.'
  return 'Lens model over the picture: arrow keys move or change what is held.'
}

function PointButton({
  which,
  point,
  frame,
  chosen,
}: {
  which: number
  point: SkyVector
  frame: Frame
  chosen: boolean
}) {
  const { x, y } = spotOf(point, frame)
  const place = `${side(point.east, 'east', 'west')}, ${side(point.north, 'north', 'south')}`
  return (
    <button
      type="button"
      data-point={which}
      aria-label={`Point ${which + 1}: ${place}`}
      aria-pressed={chosen}
      style={{ left: `${x}%`, top: `${y}%` }}
      className="absolute size-6 -translate-x-1/2 -translate-y-1/2 cursor-move rounded-full pointer-coarse:size-8"
    />
  )
}

function side(arcsec: number, positive: string, negative: string): string {
  const length = Math.abs(arcsec).toFixed(2)
  return `${length}″ ${arcsec < 0 && Number(length) > 0 ? negative : positive}`
}
