/** The views in which arcs show beside the galaxy that hides them: lens removed, blue only, and colour for the bright core. */
import { blueMinusRed } from './blue-minus-red'
import { removeLensLight } from './lens-light'
import { findCore } from './lens-light/find-core'
import type { NormalisedPlane } from './normalise-planes'
import { extraLimits, type Recipe } from './recipe'
import { renderColour } from './render-colour'
import { renderDeep } from './render-deep'
import { renderGrey } from './render-grey'
import type { RenderedView } from './rendered-view'

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
  const [blue, red] = [planes[0], planes[planes.length - 1]]
  const { width, height } = blue
  const core = findCore(planes)
  const difference = core && blueMinusRed(blue, red, core.x, core.y)
  const plain = `No galaxy in the middle to scale ${red.band} by: this is ${blue.band} as it is.`
  const values = difference ? difference.values.map((value) => value / difference.sigma) : blue.values
  const pixels = renderDeep([{ ...blue, values }], extraLimits(recipe).blue)
  const note = difference ? null : plain
  return { key: 'blue', width, height, channels: 1, pixels, note }
}

export function coreView(planes: NormalisedPlane[], recipe: Recipe): RenderedView | null {
  if (planes.length < 2) return null
  const { width, height } = planes[0]
  const pixels = renderColour(planes, recipe, extraLimits(recipe).core)
  return { key: 'core', width, height, channels: 3, pixels, note: null }
}
