/** The sentences that go with a picture that is not made of everything it should be. */
import { clippedOf, isClippedNear } from './clipped-pixels'
import { CORE_REACH } from './lens-light/core-faults'
import type { NormalisedPlane } from './normalise-planes'
import type { Recipe } from './recipe'

/** Why there is no colour view; null when there can be one. */
export function noColourNote(group: NormalisedPlane[], all: NormalisedPlane[], absent: string[]): string | null {
  if (group.filter((plane) => plane.state === 'usable').length >= 2) return null
  if (all.length < 2 && absent.length === 0) return 'No colour view: it needs at least two bands.'
  if (all.filter((plane) => plane.state === 'usable').length >= 2) {
    return `No colour view: the bands differ in size (${all.map(sizeOf).join(', ')}).`
  }
  return `No colour view: ${[...absent.map((band) => `band ${band} is missing`), ...all.flatMap(fault)].join('; ')}.`
}

/** Names the bands that were left out of a combined view for their size; null when none was. */
export function sizesNote(left: NormalisedPlane[]): string | null {
  if (left.length === 0) return null
  return `Without ${listBands(left.map((plane) => plane.band))}, which differs in size from the other bands.`
}

export function colourNote(usable: NormalisedPlane[], group: NormalisedPlane[], absent: string[]): string | null {
  const faults = [...absent.map((band) => `band ${band} is missing`), ...group.flatMap(fault)]
  const parts: string[] = []
  if (faults.length > 0) {
    parts.push(`Colours from ${usable.map((plane) => plane.band).join(' and ')} only: ${faults.join('; ')}.`)
  }
  parts.push(...missingPixelsNote(usable))
  return parts.join(' ') || null
}

export function deepNote(usable: NormalisedPlane[], group: NormalisedPlane[], absent: string[]): string | null {
  const faults = [...absent.map((band) => `band ${band} is missing`), ...group.flatMap(fault)]
  const from = usable.length > 0 ? `Made of ${usable.map((plane) => plane.band).join(', ')} only` : 'Nothing to show'
  const parts = faults.length > 0 ? [`${from}: ${faults.join('; ')}.`] : []
  if (usable.length > 0 && usable.every((plane) => plane.missing > 0)) {
    parts.push('Flat grey where no band has data.')
  } else if (usable.some((plane) => plane.missing > 0)) {
    parts.push('Some pixels are made of fewer bands.')
  }
  return parts.join(' ') || null
}

/** For the views made of all bands pixel by pixel: lens removed, blue only, bright core. */
export function arcNote(usable: NormalisedPlane[], group: NormalisedPlane[], absent: string[]): string | null {
  const faults = [...absent.map((band) => `band ${band} is missing`), ...group.flatMap(fault)]
  const from = `Made of ${usable.map((plane) => plane.band).join(', ')} only`
  return (
    [...(faults.length > 0 ? [`${from}: ${faults.join('; ')}.`] : []), ...missingPixelsNote(usable)].join(' ') || null
  )
}

/** For views of colour: bands with pixels that are clipped, in the middle or elsewhere, and what that does to the hue; null for none. */
export function saturationNote(planes: NormalisedPlane[], { version }: Recipe): string | null {
  const full = planes.filter((plane) => clippedOf(plane).length > 0)
  if (full.length === 0) return null
  const { width, height } = planes[0]
  const isMiddle = full.some((plane) => isClippedNear(plane, (width - 1) / 2, (height - 1) / 2, CORE_REACH))
  const bands = full.map((plane) => plane.band).join(', ')
  const place = isMiddle ? `The middle is saturated in ${bands}` : `An object off the middle is saturated in ${bands}`
  return `${place}: ${version >= 2 ? 'drawn without colour there' : 'its colour is not real'}.`
}

export function bandNote(plane: NormalisedPlane): string | null {
  if (plane.state === 'empty') return `Band ${plane.band} has no data in this cutout, drawn as flat grey.`
  if (plane.state === 'constant') {
    return `Every pixel of band ${plane.band} has the same value: nothing to show, drawn as flat grey.`
  }
  return missingPixelsNote([plane])[0] ?? null
}

function missingPixelsNote(planes: NormalisedPlane[]): string[] {
  const parts = planes.flatMap((plane) =>
    plane.missing > 0 ? [`${percent(plane.missing / plane.values.length)} of ${plane.band}`] : [],
  )
  return parts.length > 0 ? [`No data in ${parts.join(', ')}, drawn as flat grey.`] : []
}

function fault({ band, state }: NormalisedPlane): string[] {
  if (state === 'empty') return [`band ${band} has no data`]
  if (state === 'constant') return [`band ${band} has the same value everywhere`]
  return []
}

const percent = (share: number): string => (share < 0.01 ? 'less than 1 %' : `${Math.round(100 * share)} %`)

const sizeOf = ({ band, width, height }: NormalisedPlane): string => `${band} ${width} x ${height}`

const listBands = (bands: string[]): string => `band ${bands.join(', ')}`
