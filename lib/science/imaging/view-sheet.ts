/**
 * A view before its brightness is drawn: what stays as it is while black, white, softening and the curve are moved. The same
 * steps as in render-views.ts up to there, so a sheet drawn at the recipe's own limits is the recipe's picture.
 */
import { commonGrid } from './common-grid'
import type { NormalisedPlane } from './normalise-planes'
import type { DecodedPlane } from './plane-codec'
import { bandOfView, extraLimits, type ColourLimits, type LimitsSigma, type Recipe } from './recipe'
import { colourChannels } from './render-colour'
import { deepValues } from './render-deep'
import { whiteLevel } from './white-level'

/** What a view is made of, kept by whoever draws. */
export interface ViewSource {
  key: string
  width: number
  height: number
  /** Bands that are mixed to red, green and blue; null for a grey view. */
  mixed: NormalisedPlane[] | null
  /** Values of a grey view; null for a view of colour. */
  grey: Float32Array | null
  limits: LimitsSigma
}

/** Channels in units of the noise, row 0 = bottom. Of a grey view all three are one array. */
export interface ViewSheet {
  width: number
  height: number
  colour: boolean
  red: Float32Array
  green: Float32Array
  blue: Float32Array
  /** 1 where there is no data. */
  missing: Uint8Array
  /** The recipe's limits for this picture, white worked out. */
  blackSigma: number
  whiteSigma: number
  softeningSigma: number
}

/** null: these planes do not make this view, or there is nothing to see in them. */
export function viewSource(key: string, planes: DecodedPlane[], recipe: Recipe): ViewSource | null {
  const band = bandOfView(key)
  if (band !== null) {
    const plane = planes.find((one) => one.role === 'band' && one.band === band)
    return plane?.state === 'usable' ? greySource(key, plane, plane.values, recipe.band) : null
  }
  const usable = usableGroup(planes.filter(({ role }) => role === 'band'))
  const first = usable[0]
  if (!first) return null
  const { residual, blue, core } = extraLimits(recipe)
  if (key === 'deep') return greySource(key, first, deepValues(usable, recipe.deep), recipe.deep)
  if (key === 'residual') {
    const residuals = planes.filter(({ role }) => role === 'residual')
    if (residuals.length === 0) return null
    return residuals.length > 1
      ? colourSource(key, residuals, residual)
      : greySource(key, first, residuals[0].values, residual)
  }
  if (usable.length < 2) return null
  if (key === 'colour') return colourSource(key, usable, recipe.colour)
  if (key === 'core') return colourSource(key, usable, core)
  const difference = planes.find(({ role }) => role === 'blue')
  if (key === 'blue' && difference) return greySource(key, first, deepValues([difference], blue), blue)
  return null
}

/** @param recipe its weights mix the bands; its limits are those of the source. */
export function viewSheet(source: ViewSource, recipe: Recipe): ViewSheet {
  const { width, height, mixed, grey, limits } = source
  const { blackSigma, softeningSigma } = limits
  if (mixed === null || grey !== null) {
    const values = grey ?? new Float32Array(width * height)
    const missing = Uint8Array.from(values, (value) => (value === value ? 0 : 1))
    const whiteSigma = whiteLevel(values, limits)
    return {
      width,
      height,
      colour: false,
      red: values,
      green: values,
      blue: values,
      missing,
      blackSigma,
      whiteSigma,
      softeningSigma,
    }
  }
  const { red, green, blue, intensity, missing: absent } = colourChannels(mixed, recipe, limits as ColourLimits)
  const missing = new Uint8Array(width * height)
  for (const i of absent) missing[i] = 1
  const whiteSigma = whiteLevel(intensity, limits)
  return { width, height, colour: true, red, green, blue, missing, blackSigma, whiteSigma, softeningSigma }
}

function usableGroup(planes: DecodedPlane[]): NormalisedPlane[] {
  const native = planes.map(({ band, width, height, values, background, sigma, pixelScaleArcsec }) => {
    // Only resampled planes are normalised anew.
    const data = sigma > 0 ? values.map((value) => background + sigma * value) : values
    const sky = { background, sigma, finiteFraction: 1 }
    return { band, width, height, data, pixelScaleArcsec, sky }
  })
  const clipped = new Map(planes.map((plane) => [plane.band, plane.clipped]))
  return commonGrid(native, planes).group.flatMap((plane) =>
    plane.state === 'usable' ? { ...plane, clipped: clipped.get(plane.band) } : [],
  )
}

const greySource = (
  key: string,
  { width, height }: NormalisedPlane,
  grey: Float32Array,
  limits: LimitsSigma,
): ViewSource => ({ key, width, height, mixed: null, grey, limits })

const colourSource = (key: string, mixed: NormalisedPlane[], limits: ColourLimits): ViewSource => ({
  key,
  width: mixed[0].width,
  height: mixed[0].height,
  mixed,
  grey: null,
  limits,
})
