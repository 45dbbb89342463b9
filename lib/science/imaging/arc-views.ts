/** The views in which arcs show beside the galaxy that hides them: lens removed, blue only, and colour for the bright core. */
import { blueMinusRed } from './blue-minus-red'
import { removeLensLight } from './lens-light'
import { saturatedPixels } from './lens-light/core-faults'
import { findCore } from './lens-light/find-core'
import type { NormalisedPlane } from './normalise-planes'
import { extraLimits, type Recipe } from './recipe'
import { renderColour } from './render-colour'
import { renderDeep } from './render-deep'
import { renderGrey } from './render-grey'
import { saturationNote } from './view-notes'
import type { RenderedView } from './rendered-view'

const SATURATED = 'The core is saturated: no colour there, drawn as flat grey.'

/** @param planes usable, of one size, shortest wavelength first, as in all of these. */
export function residualView(planes: NormalisedPlane[], recipe: Recipe): RenderedView | null {
  if (planes.length === 0) return null
  const { residuals, note } = removeLensLight(planes)
  const { width, height } = planes[0]
  const limits = extraLimits(recipe).residual
  if (planes.length > 1) {
    const pixels = renderColour(residuals, recipe, limits)
    return { key: 'residual', width, height, channels: 3, pixels, note }
  }
  const pixels = renderGrey(residuals[0].values, width, height, limits)
  return { key: 'residual', width, height, channels: 1, pixels, note }
}

/** The shortest band minus the longest; null when there is only one. */
export function blueView(planes: NormalisedPlane[], recipe: Recipe): RenderedView | null {
  if (planes.length < 2) return null
  const { width, height } = planes[0]
  const { plane, note } = bluePlane(planes)
  const pixels = renderDeep([plane], extraLimits(recipe).blue)
  return { key: 'blue', width, height, channels: 1, pixels, note }
}

/** What the blue view shows, in units of its noise, from at least two planes. */
export function bluePlane(planes: NormalisedPlane[]): { plane: NormalisedPlane; note: string | null } {
  const [blue, red] = [planes[0], planes[planes.length - 1]]
  const core = findCore(planes)
  const difference = core && blueMinusRed(blue, red, core.x, core.y)
  if (!difference) {
    const note = `No galaxy in the middle to scale ${red.band} by: this is ${blue.band} as it is.`
    return { plane: blue, note }
  }
  const values = difference.values.map((value) => value / difference.sigma)
  const full = [blue, red].flatMap((plane) => saturatedPixels(plane, core.x, core.y))
  for (const pixel of full) values[pixel] = Number.NaN
  return { plane: { ...blue, values }, note: full.length > 0 ? SATURATED : null }
}

export function coreView(planes: NormalisedPlane[], recipe: Recipe): RenderedView | null {
  if (planes.length < 2) return null
  const { width, height } = planes[0]
  const pixels = renderColour(planes, recipe, extraLimits(recipe).core)
  return { key: 'core', width, height, channels: 3, pixels, note: saturationNote(planes, recipe) }
}
