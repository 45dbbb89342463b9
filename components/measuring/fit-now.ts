/** What the points on the desk give, or the sentence that says why they give nothing. */
import { CONCORDANCE, type Cosmology } from '@/lib/science/lensing/cosmology'
import { daysPerSquareArcsec } from '@/lib/science/lensing/time-delays'
import type { EinsteinMass } from '@/lib/science/lensing/einstein-mass'
import {
  fitShape,
  imagesOf,
  massOf,
  measuringRefusal,
  residualOf,
  type Fitted,
  type FittedImage,
} from '@/lib/work/measuring/fitted'
import type { UsedRedshift } from '@/lib/work/measuring/redshift-choice'
import type { Measured } from './desk-state'
import type { Which } from './redshift-draft'

export type CurveNow =
  | { fitted: Extract<Fitted, { kind: 'circle' | 'ellipse' }>; radiusArcsec: number; errorArcsec: number | null }
  | { sentence: string }

/** A circle or an ellipse through the points; an angle, which no cosmology enters. */
export function curveNow(
  { points, curve, centre }: Pick<Measured, 'points' | 'curve' | 'centre'>,
  pixelScaleArcsec: number,
): CurveNow {
  const shape = curve === 'circle' ? ({ kind: 'circle', centre } as const) : ({ kind: 'ellipse' } as const)
  try {
    const found = fitShape(shape, points, { pixelScaleArcsec, cosmology: CONCORDANCE, lens: null, source: null })
    if (found.fitted.kind === 'model') return { sentence: '' }
    return { ...found, fitted: found.fitted }
  } catch (error) {
    return { sentence: sentenceOf(error) }
  }
}

export type MassNow = EinsteinMass | { sentence: string } | null

export function massNow(
  radius: { radiusArcsec: number; errorArcsec: number | null },
  used: Record<Which, UsedRedshift | null>,
  cosmology: Cosmology,
): MassNow {
  try {
    return massOf(radius, { ...used, cosmology })
  } catch (error) {
    return { sentence: sentenceOf(error) }
  }
}

export interface ModelNow {
  images: FittedImage[]
  residualArcsec: number | null
}

/** Images with magnification and delays, and how far the points lie from them. */
export function modelNow(
  { model, points, fit }: Pick<Measured, 'model' | 'points' | 'fit'>,
  used: Record<Which, UsedRedshift | null>,
  cosmology: Cosmology,
): ModelNow {
  const days =
    used.lens && used.source ? daysPerSquareArcsec(cosmology, used.lens.value, used.source.value) : Number.NaN
  const images = imagesOf(model.lens, model.source, days)
  return { images, residualArcsec: fit ? fit.result.residualArcsec : residualOf(points, images) }
}

export function sentenceOf(error: unknown): string {
  const sentence = measuringRefusal(error)
  if (sentence === null) throw error
  return sentence
}
