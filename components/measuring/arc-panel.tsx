'use client'

import { clickErrorArcsec } from '@/lib/work/measuring/fitted'
import { Choice } from './choice'
import type { DeskState } from './desk-state'
import type { DeskStore } from './desk-store'
import type { CurveNow } from './fit-now'
import { arcsec, withError } from './in-figures'
import { Remarks } from './mass-table'
import { PointButtons } from './point-buttons'

/** A circle or an ellipse through clicked points: what it says of the Einstein radius, at once. */
export function ArcPanel({
  desk,
  state,
  now,
  pixelScaleArcsec,
}: {
  desk: DeskStore
  state: DeskState
  now: CurveNow
  pixelScaleArcsec: number
}) {
  const { points, curve, centre } = state
  return (
    <>
      <div className="flex flex-wrap items-end gap-x-4 gap-y-2">
        <Choice
          label="Curve"
          options={[
            ['circle', 'Circle'],
            ['ellipse', 'Ellipse'],
          ]}
          value={curve}
          onChange={(value) => desk.act({ curve: value })}
        />
        {curve === 'circle' ? (
          <Choice
            label="Its centre"
            options={[
              ['free', 'From the points'],
              ['held', 'The middle of the picture'],
            ]}
            value={centre}
            onChange={(value) => desk.act({ centre: value })}
          />
        ) : null}
      </div>
      <PointButtons desk={desk} state={state} />
      {'fitted' in now ? (
        <CurveNumbers now={now} pixelScaleArcsec={pixelScaleArcsec} />
      ) : (
        <p role="status" className="text-small text-mute">
          {points.length === 0 ? 'Press along the arc: each press sets a point. Three make a circle.' : now.sentence}
        </p>
      )}
    </>
  )
}

function CurveNumbers({
  now,
  pixelScaleArcsec,
}: {
  now: Extract<CurveNow, { fitted: unknown }>
  pixelScaleArcsec: number
}) {
  const { fitted, radiusArcsec, errorArcsec } = now
  const details = [
    ['Residual', `${arcsec(fitted.residualArcsec, 3)}, ${(fitted.residualArcsec / pixelScaleArcsec).toFixed(2)} px`],
    ['Centre, east and north', `${arcsec(fitted.centre.east)}, ${arcsec(fitted.centre.north)}`],
    ['Points span', `${Math.round(fitted.spanDeg)}°`],
    ...(fitted.kind === 'ellipse'
      ? [
          ['Half axes', `${arcsec(fitted.semiMajorArcsec)}, ${arcsec(fitted.semiMinorArcsec)}`],
          [
            'Long axis',
            fitted.positionAngleErrorDeg === null
              ? 'round to within the errors'
              : `${withError(fitted.positionAngleDeg, fitted.positionAngleErrorDeg, '°')} east of north`,
          ],
        ]
      : []),
  ]
  return (
    <div className="flex flex-col gap-2">
      <EinsteinRadius radiusArcsec={radiusArcsec} errorArcsec={errorArcsec} />
      <dl className="figures grid grid-cols-[auto_1fr] gap-x-4 gap-y-0.5 text-note">
        {details.map(([name, value]) => (
          <div key={name} className="contents">
            <dt className="font-sans text-mute">{name}</dt>
            <dd className="text-right">{value}</dd>
          </div>
        ))}
      </dl>
      <Remarks lines={fitted.notes} />
      <p className="text-note text-mute">{clickErrorInWords(pixelScaleArcsec)}</p>
    </div>
  )
}

/** Where a ± comes from. */
export const clickErrorInWords = (pixelScaleArcsec: number): string =>
  `±: 1 σ, each press taken to be good to half a pixel, ${arcsec(clickErrorArcsec(pixelScaleArcsec), 3)}.`

export function EinsteinRadius({ radiusArcsec, errorArcsec }: { radiusArcsec: number; errorArcsec: number | null }) {
  return (
    <p role="status" className="flex items-baseline gap-2">
      <span className="text-note text-mute">Einstein radius</span>
      <span className="figures text-title font-semibold">{withError(radiusArcsec, errorArcsec, '″')}</span>
    </p>
  )
}
