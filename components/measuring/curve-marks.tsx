/** A circle or an ellipse that was fitted, and what others keep of this candidate. */
import type { SkyVector } from '@/lib/science/lensing/sis'
import type { MeasurementShown } from '@/lib/work/measuring/measurement-shown'
import { spotOf, type Frame } from './frame'
import { Cross, Label, PointMarks, SkyLine } from './marks'
import { ModelCurves } from './model-marks'

const STEPS = 96

export interface Curve {
  centre: SkyVector
  semiMajorArcsec: number
  semiMinorArcsec: number
  positionAngleDeg: number
}

export const circleCurve = (centre: SkyVector, radiusArcsec: number): Curve => ({
  centre,
  semiMajorArcsec: radiusArcsec,
  semiMinorArcsec: radiusArcsec,
  positionAngleDeg: 0,
})

export function curvePlaces({ centre, semiMajorArcsec, semiMinorArcsec, positionAngleDeg }: Curve): SkyVector[] {
  const angle = (positionAngleDeg * Math.PI) / 180
  const [sin, cos] = [Math.sin(angle), Math.cos(angle)]
  return Array.from({ length: STEPS }, (_, k) => {
    const turn = (2 * Math.PI * k) / STEPS
    const [along, across] = [semiMajorArcsec * Math.cos(turn), semiMinorArcsec * Math.sin(turn)]
    return {
      east: centre.east + along * sin + across * cos,
      north: centre.north + along * cos - across * sin,
    }
  })
}

export function CurveMarks({ curve, frame, dash }: { curve: Curve; frame: Frame; dash?: string }) {
  return (
    <>
      <SkyLine offsets={curvePlaces(curve)} frame={frame} dash={dash} />
      <Cross at={spotOf(curve.centre, frame)} />
    </>
  )
}

/** A kept measurement, with whose it is. */
export function KeptMarks({ kept, frame }: { kept: MeasurementShown; frame: Frame }) {
  const { fitted, points } = kept
  if (fitted.kind === 'model') {
    const shear = fitted.lens.shear ?? { strength: 0, positionAngleDeg: 0 }
    const lens = { ...fitted.lens, centre: fitted.lens.centre ?? { east: 0, north: 0 }, shear }
    return (
      <>
        <ModelCurves
          model={{ lens, source: fitted.source }}
          sourceRadiusArcsec={fitted.sourceRadiusArcsec}
          frame={frame}
        />
        <PointMarks points={points} chosen={null} frame={frame} />
      </>
    )
  }
  const curve = fitted.kind === 'circle' ? circleCurve(fitted.centre, fitted.radiusArcsec) : fitted
  const top = spotOf({ east: curve.centre.east, north: curve.centre.north + kept.einsteinRadiusArcsec }, frame)
  return (
    <>
      <CurveMarks curve={curve} frame={frame} dash="5 3" />
      <PointMarks points={points} chosen={null} frame={frame} />
      <Label at={{ x: top.x, y: top.y - 2.5 }} text={kept.own ? 'you' : kept.by} />
    </>
  )
}
