/** What is found by a measurement: pure, so that the page and the server work it out alike. */
import type { Cosmology } from '@/lib/science/lensing/cosmology'
import { einsteinMass, type EinsteinMass } from '@/lib/science/lensing/einstein-mass'
import { fitCircle, type CircleFit } from '@/lib/science/lensing/fit-circle'
import { fitEllipse, type EllipseFit } from '@/lib/science/lensing/fit-ellipse'
import { fitSie, type SieFit } from '@/lib/science/lensing/fit-sie'
import { pairImages } from '@/lib/science/lensing/fit-sie-residuals'
import { lensModel, type ImageKind, type ShearedLens } from '@/lib/science/lensing/sie-shear'
import { pointImages } from '@/lib/science/lensing/sie-shear-images'
import type { SkyVector } from '@/lib/science/lensing/sis'
import { daysPerSquareArcsec, delayedImages } from '@/lib/science/lensing/time-delays'
import type { MeasuredShape, ModelShape } from './measurement-input'
import { redshiftInput, type UsedRedshift } from './redshift-choice'

export interface FittedImage extends SkyVector {
  /** null on the critical curve, where it has no bound */
  magnification: number | null
  kind: ImageKind
  /** after the first image; null without both redshifts */
  delayDays: number | null
}

export type FittedModel = Pick<ModelShape, 'kind' | 'source' | 'sourceRadiusArcsec'> & {
  lens: ShearedLens
  /** null: set by hand */
  fit: (Omit<SieFit, 'lens' | 'source' | 'images' | 'residualsArcsec'> & NonNullable<ModelShape['fit']>) | null
  /** Of the points from the nearest images; null without points, or where an image is lacking. */
  residualArcsec: number | null
  residualPixels: number | null
  /** in the order in which they vary */
  images: FittedImage[]
}

export type Fitted =
  ({ kind: 'circle'; centreIsHeld: boolean } & CircleFit) | ({ kind: 'ellipse' } & EllipseFit) | FittedModel

export interface MeasuringContext {
  pixelScaleArcsec: number
  cosmology: Cosmology
  lens: UsedRedshift | null
  source: UsedRedshift | null
}

/** Half a pixel is how well a click can be placed: common practice, no source. */
export const clickErrorArcsec = (pixelScaleArcsec: number): number => pixelScaleArcsec / 2

/** The candidate's own place, where its galaxy is. */
export const HERE: SkyVector = { east: 0, north: 0 }

/** @throws ArcFitError, FitRefusedError with a sentence, where the points do not do. */
export function fitShape(
  shape: MeasuredShape,
  points: readonly SkyVector[],
  context: MeasuringContext,
): { fitted: Fitted; radiusArcsec: number; errorArcsec: number | null } {
  const clicked = { points, clickErrorArcsec: clickErrorArcsec(context.pixelScaleArcsec) }
  if (shape.kind === 'model') return fitModel(shape, points, context)
  if (shape.kind === 'ellipse') {
    const fit = fitEllipse(clicked)
    return { fitted: { kind: 'ellipse', ...fit }, radiusArcsec: fit.radiusArcsec, errorArcsec: fit.radiusErrorArcsec }
  }
  const held = shape.centre === 'held'
  const fit = fitCircle(clicked, held ? HERE : undefined)
  return {
    fitted: { kind: 'circle', centreIsHeld: held, ...fit },
    radiusArcsec: fit.radiusArcsec,
    errorArcsec: fit.radiusErrorArcsec,
  }
}

/** A fitted model is fitted again from its points, so that its numbers are those of the points and nobody's word. */
function fitModel(shape: ModelShape, points: readonly SkyVector[], context: MeasuringContext) {
  const { fit: how, sourceRadiusArcsec } = shape
  if (how === null) {
    const model = describeModel(shape.lens, shape.source, context)
    const residualArcsec = residualOf(points, model.images)
    const fitted: FittedModel = {
      kind: 'model',
      lens: shape.lens,
      source: shape.source,
      sourceRadiusArcsec,
      fit: null,
      residualArcsec,
      residualPixels: residualArcsec === null ? null : residualArcsec / context.pixelScaleArcsec,
      ...model,
    }
    return { fitted, radiusArcsec: shape.lens.einsteinRadiusArcsec, errorArcsec: null }
  }
  const {
    lens,
    source,
    images: _images,
    residualsArcsec: _each,
    ...fit
  } = fitLens({ lens: shape.lens, fit: how, start: shape.source }, points, context)
  const fitted: FittedModel = {
    kind: 'model',
    lens,
    source,
    sourceRadiusArcsec,
    fit: { ...fit, ...how },
    residualArcsec: Number.isFinite(fit.residualArcsec) ? fit.residualArcsec : null,
    residualPixels: Number.isFinite(fit.residualPixels) ? fit.residualPixels : null,
    ...describeModel(lens, source, context),
  }
  const radius = fit.parameters.find(({ name }) => name === 'Einstein radius')
  return { fitted, radiusArcsec: lens.einsteinRadiusArcsec, errorArcsec: radius?.uncertainty || null }
}

/**
 * The centre is held; a kind that leaves out ellipticity or shear is round or has none.
 * @param start the source of a fit made before, from which alone the search begins: a search from all round takes up to 0.6 s.
 */
export function fitLens(
  { lens, fit, start }: Pick<ModelShape, 'lens'> & { fit: NonNullable<ModelShape['fit']>; start?: SkyVector },
  points: readonly SkyVector[],
  { pixelScaleArcsec }: Pick<MeasuringContext, 'pixelScaleArcsec'>,
): SieFit {
  return fitSie({
    points,
    pointsAre: fit.pointsAre,
    kind: fit.kind,
    held: { centre: lens.centre },
    clickErrorArcsec: clickErrorArcsec(pixelScaleArcsec),
    pixelScaleArcsec,
    ...(start && { start: { lens, source: start } }),
  })
}

export function describeModel(
  lens: ShearedLens,
  source: SkyVector,
  context: Pick<MeasuringContext, 'cosmology' | 'lens' | 'source'>,
): { images: FittedImage[] } {
  const days =
    context.lens && context.source
      ? daysPerSquareArcsec(context.cosmology, context.lens.value, context.source.value)
      : Number.NaN
  return { images: imagesOf(lens, source, days) }
}

/** @param daysPerArcsec2 NaN where there are no redshifts. */
export function imagesOf(lens: ShearedLens, source: SkyVector, daysPerArcsec2: number): FittedImage[] {
  const model = lensModel(lens)
  return delayedImages(model, source, pointImages(model, source), daysPerArcsec2).map(
    ({ east, north, magnification, kind, delayDays }) => ({
      east,
      north,
      kind,
      magnification: Number.isFinite(magnification) ? magnification : null,
      delayDays: Number.isFinite(delayDays) ? delayDays : null,
    }),
  )
}

/** Root mean square distance of the points from images of their own; null without points or with too few images. */
export function residualOf(points: readonly SkyVector[], images: readonly SkyVector[]): number | null {
  if (points.length === 0 || images.length < points.length) return null
  const asImages = images.map(({ east, north }) => ({ east, north, magnification: 1, kind: 'minimum' as const }))
  let sum = 0
  for (const [k, image] of pairImages(points, asImages).entries()) {
    if (image === null) return null
    sum += (image.east - points[k].east) ** 2 + (image.north - points[k].north) ** 2
  }
  return Math.sqrt(sum / points.length)
}

/** null without both redshifts. @throws EinsteinMassError with a sentence, as for a source nearer than the lens. */
export function massOf(
  radius: { radiusArcsec: number; errorArcsec: number | null },
  { lens, source, cosmology }: Pick<MeasuringContext, 'cosmology' | 'lens' | 'source'>,
): EinsteinMass | null {
  if (!lens || !source) return null
  return einsteinMass({
    radiusArcsec: radius.radiusArcsec,
    radiusErrorArcsec: radius.errorArcsec ?? 0,
    lensRedshift: redshiftInput(lens),
    sourceRedshift: redshiftInput(source),
    cosmology,
  })
}

/** Errors of the science whose message is a sentence for the person who measures. */
export function measuringRefusal(error: unknown): string | null {
  const named = error instanceof Error ? error.name : ''
  if (!['ArcFitError', 'FitRefusedError', 'EinsteinMassError', 'RangeError'].includes(named)) return null
  return (error as Error).message
}
