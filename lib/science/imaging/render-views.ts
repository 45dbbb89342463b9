/**
 * All views of a candidate from its band planes. What cannot be shown rightly is not shown: a view is left out or drawn
 * flat, and a note says why.
 */
import { blueView, coreView, residualView } from './arc-views'
import { withClipped } from './clipped-pixels'
import { commonGrid } from './common-grid'
import { normalisePlane, type BandPlane, type NormalisedPlane } from './normalise-planes'
import { orientPlanes } from './orient-planes'
import { bandOfView, type Recipe } from './recipe'
import { renderColour } from './render-colour'
import { renderDeep } from './render-deep'

import { MISSING_GREY, renderGrey } from './render-grey'
import { arcNote, bandNote, colourNote, deepNote, noColourNote, saturationNote, sizesNote } from './view-notes'

import type { RenderedView } from './rendered-view'

export type { BandPlane } from './normalise-planes'
export type { RenderedView } from './rendered-view'

/**
 * The recipe's views that these planes allow, in the recipe's order.
 * @param given shortest wavelength first, row 0 = bottom. Turned north up first where orient-planes.ts says so. Bands may differ in size: each keeps its own band view, while
 *   colour and deep are made of the largest group of equal size.
 * @returns an empty list for no planes. Never throws when each plane has width x height pixels, at least one.
 */
export function renderViews(given: BandPlane[], recipe: Recipe): RenderedView[] {
  const { planes, note: turnNote } = orientPlanes(given, recipe.northUp === true)
  const native = planes.map(normalisePlane)
  const { all, group: bare, note } = commonGrid(planes, native)
  const group = bare.map(withClipped)
  const matchNote = [turnNote, note].filter(Boolean).join(' ') || null
  const wanted = recipe.views.flatMap((key) => bandOfView(key) ?? [])
  const absent = wanted.filter((band) => !all.some((plane) => plane.band === band))
  const left = all.filter((plane) => !bare.includes(plane))
  const noColour = recipe.views.includes('colour') ? noColourNote(group, all, absent) : null
  const scene: Scene = { group, left, absent, recipe, matchNote }
  const views: RenderedView[] = []
  for (const key of recipe.views) {
    const band = bandOfView(key)
    const view =
      band !== null
        ? bandView(native.find((plane) => plane.band === band) ?? null, recipe)
        : combinedView(key, scene, noColour !== null)
    if (view) views.push(view)
  }
  const first = views.find((view) => view.key === 'deep') ?? views[0]
  if (noColour !== null && first) first.note = [noColour, first.note].filter(Boolean).join(' ')
  return views
}

/** What the combined views are made of. */
interface Scene {
  group: NormalisedPlane[]
  left: NormalisedPlane[]
  absent: string[]
  recipe: Recipe
  matchNote: string | null
}

function combinedView(key: string, scene: Scene, noColour: boolean): RenderedView | null {
  const { group, left, absent, recipe, matchNote } = scene
  const usable = group.filter((plane) => plane.state === 'usable')
  const view =
    key === 'colour'
      ? noColour
        ? null
        : colourView(group, left, absent, recipe)
      : key === 'deep'
        ? deepView(group, left, absent, recipe)
        : key === 'residual'
          ? residualView(usable, recipe)
          : key === 'blue'
            ? blueView(usable, recipe)
            : key === 'core'
              ? coreView(usable, recipe)
              : null
  if (view === null) return null
  const bands = key === 'colour' || key === 'deep' ? [] : [sizesNote(left), arcNote(usable, group, absent)]
  return { ...view, note: [matchNote, ...bands, view.note].filter(Boolean).join(' ') || null }
}

function colourView(
  group: NormalisedPlane[],
  left: NormalisedPlane[],
  absent: string[],
  recipe: Recipe,
): RenderedView | null {
  const usable = group.filter((plane) => plane.state === 'usable')
  const { width, height } = usable[0]
  const note =
    [sizesNote(left), colourNote(usable, group, absent), saturationNote(usable, recipe)].filter(Boolean).join(' ') ||
    null
  return { key: 'colour', width, height, channels: 3, pixels: renderColour(usable, recipe), note }
}

function deepView(
  group: NormalisedPlane[],
  left: NormalisedPlane[],
  absent: string[],
  recipe: Recipe,
): RenderedView | null {
  const first = group[0]
  if (!first) return null
  const { width, height } = first
  const usable = group.filter((plane) => plane.state === 'usable')
  const pixels = usable.length > 0 ? renderDeep(usable, recipe.deep) : new Uint8Array(width * height).fill(MISSING_GREY)
  const note = [sizesNote(left), deepNote(usable, group, absent)].filter(Boolean).join(' ') || null
  return { key: 'deep', width, height, channels: 1, pixels, note }
}

function bandView(plane: NormalisedPlane | null, recipe: Recipe): RenderedView | null {
  if (!plane) return null
  const { width, height, values } = plane
  const pixels =
    plane.state === 'usable'
      ? renderGrey(values, width, height, recipe.band)
      : new Uint8Array(width * height).fill(MISSING_GREY)
  return { key: `band:${plane.band}`, width, height, channels: 1, pixels, note: bandNote(plane) }
}
