'use client'

import { Button } from '@/components/ui/button'
import { cosmologyInWords } from '@/lib/work/campaigns/cosmology-of'
import type { MeasurementShown } from '@/lib/work/measuring/measurement-shown'
import { EinsteinRadius } from './arc-panel'
import type { DeskStore } from './desk-store'
import { ImagesTable } from './images-table'
import { arcsec, withError } from './in-figures'
import { LensFit } from './lens-fit'
import { MassTable, Remarks } from './mass-table'
import { redshiftInWords } from './kept-words'

/** A kept measurement with all its numbers, read-only. */
export function KeptMeasurement({
  desk,
  kept,
  mayMeasure,
}: {
  desk: DeskStore
  kept: MeasurementShown
  mayMeasure: boolean
}) {
  const { fitted, lens, source, mass, cosmology, remark } = kept
  return (
    <div className="flex flex-col gap-3">
      <EinsteinRadius radiusArcsec={kept.einsteinRadiusArcsec} errorArcsec={kept.errorArcsec} />
      {remark ? <p className="max-w-prose text-small whitespace-pre-line">“{remark}”</p> : null}
      {fitted.kind === 'model' ? (
        <>
          <dl className="figures grid grid-cols-[auto_1fr] gap-x-4 gap-y-0.5 text-note">
            {modelFacts(fitted).map(([name, value]) => (
              <div key={name} className="contents">
                <dt className="font-sans text-mute">{name}</dt>
                <dd className="text-right">{value}</dd>
              </div>
            ))}
          </dl>
          {fitted.fit ? (
            <LensFit fit={fitted.fit} />
          ) : (
            <p className="text-note text-mute">
              Set by hand
              {fitted.residualArcsec !== null && fitted.residualPixels !== null
                ? `; residual ${fitted.residualArcsec.toFixed(3)}″, ${fitted.residualPixels.toFixed(2)} px`
                : ''}
              .
            </p>
          )}
          <ImagesTable images={fitted.images} delays={lens !== null && source !== null} />
        </>
      ) : (
        <>
          <p className="figures text-note text-mute">
            {fitted.kind === 'circle' ? 'Circle' : 'Ellipse'} through {kept.points.length} points, residual{' '}
            {arcsec(fitted.residualArcsec, 3)}
            {fitted.kind === 'ellipse'
              ? `, half axes ${arcsec(fitted.semiMajorArcsec)} and ${arcsec(fitted.semiMinorArcsec)}, long axis ${withError(fitted.positionAngleDeg, fitted.positionAngleErrorDeg, '°')}`
              : ''}
            .
          </p>
          <Remarks lines={fitted.notes} />
        </>
      )}
      <p className="text-note text-mute">
        Lens: {redshiftInWords(lens)}. Source: {redshiftInWords(source)}.
      </p>
      {mass ? (
        <MassTable mass={mass} cosmology={cosmology} />
      ) : (
        <p className="text-note text-mute">{cosmologyInWords(cosmology)}.</p>
      )}
      {mayMeasure ? (
        <Button className="self-start pointer-coarse:min-h-11" onClick={() => desk.goOnFrom(kept)}>
          Go on from here
        </Button>
      ) : null}
    </div>
  )
}

function modelFacts(fitted: Extract<MeasurementShown['fitted'], { kind: 'model' }>): [string, string][] {
  const { lens, source, sourceRadiusArcsec } = fitted
  const place = ({ east, north }: { east: number; north: number }) => `${arcsec(east)}, ${arcsec(north)}`
  return [
    ['Axis ratio', lens.axisRatio.toFixed(2)],
    ['Long axis, east of north', `${Math.round(lens.positionAngleDeg)}°`],
    ...(lens.shear
      ? [
          ['Shear', `${lens.shear.strength.toFixed(3)} at ${Math.round(lens.shear.positionAngleDeg)}°`] as [
            string,
            string,
          ],
        ]
      : []),
    ['Lens, east and north', place(lens.centre ?? { east: 0, north: 0 })],
    ['Source, east and north', place(source)],
    ['Size of the source', arcsec(sourceRadiusArcsec)],
  ]
}
