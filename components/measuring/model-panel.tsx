'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { fitLens } from '@/lib/work/measuring/fitted'
import { Choice } from './choice'
import type { DeskState } from './desk-state'
import type { DeskStore } from './desk-store'
import { clickErrorInWords, EinsteinRadius } from './arc-panel'
import { sentenceOf, type ModelNow } from './fit-now'
import { ImagesTable } from './images-table'
import { LensFit } from './lens-fit'
import { ModelFields } from './model-fields'
import type { Grip } from './move-lens'
import { PointButtons } from './point-buttons'

const GRIPS: readonly (readonly [Grip, string])[] = [
  ['source', '○ Source'],
  ['size', '□ Radius'],
  ['shape', '◇ Shape'],
  ['shear', '△ Shear'],
  ['lens', '✛ Lens'],
]

/** Would a lens do this? An isothermal ellipsoid with shear, moved by hand or fitted to clicked images. */
export function ModelPanel({
  desk,
  state,
  now,
  pixelScaleArcsec,
  delays,
}: {
  desk: DeskStore
  state: DeskState
  now: ModelNow
  pixelScaleArcsec: number
  /** There are redshifts to work them out with. */
  delays: boolean
}) {
  const { model, marking, grip, fit } = state
  return (
    <>
      <Choice
        label="A drag on the picture, or arrow keys, move"
        options={[...GRIPS, ['points', '◦ Points'] as const]}
        value={marking ? 'points' : grip}
        onChange={(value) => desk.set(value === 'points' ? { marking: true } : { marking: false, grip: value })}
      />
      <Choice
        label="Drawn over the picture"
        options={[
          ['all', 'Everything'],
          ['arcs', 'Arcs only'],
          ['nothing', 'Nothing'],
        ]}
        value={state.drawn}
        onChange={(drawn) => desk.set({ drawn })}
      />
      <EinsteinRadius
        radiusArcsec={model.lens.einsteinRadiusArcsec}
        errorArcsec={fit?.result.parameters[0]?.uncertainty ?? null}
      />
      <ModelFields desk={desk} state={state} pixelScaleArcsec={pixelScaleArcsec} />
      {state.drawn === 'all' ? (
        <p className="text-note text-mute">
          Solid: critical curve. Dashed: caustic, in the plane of the source. ‘Room around it’ shows what lies outside.
        </p>
      ) : null}
      <ImagesTable images={now.images} delays={delays} />
      <FitPart desk={desk} state={state} now={now} pixelScaleArcsec={pixelScaleArcsec} />
    </>
  )
}

function FitPart({
  desk,
  state,
  now,
  pixelScaleArcsec,
}: {
  desk: DeskStore
  state: DeskState
  now: ModelNow
  pixelScaleArcsec: number
}) {
  const { points, pointsAre, fitKind, fit, model } = state
  const [fitting, setFitting] = useState(false)
  const [refusal, setRefusal] = useState<{ of: unknown; sentence: string } | null>(null)
  const runFit = () => {
    setFitting(true)
    // After the next frame, so that the button can say what is going on.
    setTimeout(() => {
      try {
        const how = { kind: fitKind, pointsAre }
        const result = fitLens({ lens: model.lens, fit: how }, points, { pixelScaleArcsec })
        const { lens, source } = result
        const shear = lens.shear ?? { strength: 0, positionAngleDeg: model.lens.shear.positionAngleDeg }
        const centre = lens.centre ?? model.lens.centre
        desk.act({ model: { lens: { ...lens, centre, shear }, source }, fit: { ...how, result } })
        setRefusal(null)
      } catch (error) {
        setRefusal({ of: points, sentence: sentenceOf(error) })
      }
      setFitting(false)
    }, 30)
  }
  return (
    <section aria-label="Fit" className="flex flex-col gap-2.5 border-t border-line pt-3">
      <PointButtons desk={desk} state={state} />
      <div className="flex flex-wrap items-end gap-x-4 gap-y-2">
        <Choice
          label="The points are"
          options={[
            ['images', 'Images of one point'],
            ['arc', 'Along one arc'],
          ]}
          value={pointsAre}
          onChange={(value) => desk.set({ pointsAre: value })}
        />
        <Choice
          label="Free in the fit, with the source"
          options={[
            ['sphere', 'Radius'],
            ['ellipsoid', '+ shape'],
            ['sphere-shear', '+ shear'],
            ['ellipsoid-shear', '+ both'],
          ]}
          value={fitKind}
          onChange={(value) => desk.set({ fitKind: value })}
        />
      </div>
      <div className="flex flex-wrap items-center gap-x-4 gap-y-1">
        <Button disabled={fitting || points.length === 0} onClick={runFit} className="pointer-coarse:min-h-11">
          {fitting ? 'Fitting…' : 'Fit'}
        </Button>
        {points.length === 0 ? (
          <p className="text-note text-mute">Choose ‘Points’ and press on the images first.</p>
        ) : fit ? null : (
          <p role="status" className="figures text-note text-mute">
            {residualInWords(now.residualArcsec, pixelScaleArcsec, points.length, now.images.length)}
          </p>
        )}
      </div>
      {refusal && refusal.of === points ? (
        <p role="alert" className="text-note text-alarm">
          {refusal.sentence}
        </p>
      ) : null}
      {fit ? (
        <>
          <LensFit fit={fit.result} />
          <p className="text-note text-mute">{clickErrorInWords(pixelScaleArcsec)} χ² is in units of it.</p>
        </>
      ) : null}
    </section>
  )
}

export function residualInWords(
  residualArcsec: number | null,
  pixelScaleArcsec: number,
  points: number,
  images: number,
): string {
  if (residualArcsec === null || !Number.isFinite(residualArcsec))
    return `By hand: the model makes ${images} of ${points} images.`
  return `By hand: residual ${residualArcsec.toFixed(3)}″, ${(residualArcsec / pixelScaleArcsec).toFixed(2)} px.`
}
