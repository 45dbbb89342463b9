/** The galaxy's ellipses from all bands together, and its brightness in each band along them. */
import { blueMinusRed } from '../blue-minus-red'
import type { NormalisedPlane } from '../normalise-planes'
import { saturatedPixels } from './core-faults'
import { ellipticalRadii, type EllipseGeometry } from './ellipse-geometry'
import { galaxyStack, type Core } from './find-core'
import { basisFor, fitProfile, type ProfileBasis, type RadialProfile } from './gaussian-profile'
import { improveGeometry } from './geometry-step'
import { MISSING, profileRows, ringsFor, type ForeignLight, type Rings, type SortedRings } from './profile-rows'
import { markAbove, markBluer } from './source-mask'

/** Share of the light by which ellipses miss a galaxy before they have settled, round by round. */
const SHAPE_DOUBTS = [0.1, 0.05, 0.03, 0.02]
const FREE = { centrePixels: 0.1, coreEllipticity: 0.15, outerEllipticity: 0.25 }
/** Bands may be off by a fraction of a pixel and rounded differently by their seeing. */
const BAND = { centrePixels: 0.1, coreEllipticity: 0.05, outerEllipticity: 0.01 }
const CORE_FWHM_TO_TURN = 0.65
/** Product of the ellipticities of core and outside from which they cross, and the step to a wider turn. */
const CROSSED = 0.003
const WIDER = 1.4

export interface BandLight {
  geometry: EllipseGeometry
  profile: RadialProfile
  /** Light of the galaxy in units of the band's noise, row 0 = bottom. */
  light: Float32Array
}

export interface GalaxyLight {
  core: Core
  /** Saturated pixels of the core, by band. */
  saturated: number[][]
  geometry: EllipseGeometry
  /** Pixels that were left out as light of something else, or for want of data. */
  excluded: Uint8Array
  bands: BandLight[]
}

/**
 * @param planes usable, of one size, shortest wavelength first.
 * @param core of the galaxy, as found in them.
 */
export function fitGalaxy(planes: NormalisedPlane[], core: Core): GalaxyLight {
  const { width, height } = planes[0]
  const stack = galaxyStack(planes, core)
  const missing = new Uint8Array(stack.length)
  for (const { values } of planes)
    for (let i = 0; i < missing.length; i++) if (values[i] !== values[i]) missing[i] = MISSING
  const saturated = planes.map((plane) => saturatedPixels(plane, core.x, core.y))
  for (const pixels of saturated) for (const i of pixels) missing[i] = MISSING
  const coloured = missing.slice()
  const difference = planes.length > 1 ? blueMinusRed(planes[0], planes[planes.length - 1], core.x, core.y) : null
  const foreign: ForeignLight | null = difference
    ? { values: difference.values, smooth: markBluer(coloured, difference, width, height) }
    : null
  const basis = basisFor(Math.ceil(Math.hypot(width, height)))
  const rings = ringsFor(0.6 * Math.max(width, height))
  const fitReach = 0.3 * Math.max(width, height)
  let geometry: EllipseGeometry = { x: core.x, y: core.y, core: [0, 0], outer: [0, 0], turnRadius: 2.5 }
  const anchor = geometry
  let turn = 1
  let profile: RadialProfile | null = null
  let excluded: Uint8Array = coloured
  for (const shapeDoubt of SHAPE_DOUBTS) {
    const radii = ellipticalRadii(geometry, width, height)
    const sorted = rings.sort(radii)
    profile = fitProfile(basis, profileRows(basis, rings, sorted, radii, stack, excluded, profile, foreign))
    excluded = coloured.slice()
    markAbove(excluded, stack, radii, profile, width, height, shapeDoubt)
    geometry = { ...geometry, turnRadius: turn * turnRadiusOf(profile) }
    geometry = improveGeometry(
      geometry,
      profile,
      stack,
      excluded,
      foreign,
      width,
      height,
      fitReach,
      shapeDoubt,
      FREE,
      anchor,
    )
    // A core drawn out across the galaxy means that the ellipses turn round too near to the centre.
    const along = geometry.core[0] * geometry.outer[0] + geometry.core[1] * geometry.outer[1]
    if (along < -CROSSED) {
      turn *= WIDER
      geometry = { ...geometry, core: [0, 0] }
    }
  }
  const start = ellipticalRadii(geometry, width, height)
  const shared = { radii: start, sorted: rings.sort(start) }
  const bands = planes.map((plane) => fitBand(plane, geometry, shared, excluded, basis, rings, fitReach, foreign))
  return { core, saturated, geometry, excluded, bands }
}

/** Half the width of the core at half its brightness, as seen, sets how far seeing rounds it. */
function turnRadiusOf(profile: RadialProfile): number {
  const half = profile.at(0) / 2
  let radius = 0.5
  while (radius < 10 && profile.at(radius) > half) radius += 0.25
  return 2 * radius * CORE_FWHM_TO_TURN
}

function fitBand(
  plane: NormalisedPlane,
  joint: EllipseGeometry,
  /** Pixels by the joint ellipses, from which every band begins. */
  shared: { radii: Float32Array; sorted: SortedRings },
  excluded: Uint8Array,
  basis: ProfileBasis,
  rings: Rings,
  fitReach: number,
  foreign: ForeignLight | null,
): BandLight {
  const { width, height, values } = plane
  const first = fitProfile(
    basis,
    profileRows(basis, rings, shared.sorted, shared.radii, values, excluded, null, foreign),
  )
  const geometry = improveGeometry(joint, first, values, excluded, foreign, width, height, fitReach, 0.02, BAND, joint)
  const radii = ellipticalRadii(geometry, width, height)
  const profile = fitProfile(
    basis,
    profileRows(basis, rings, rings.sort(radii), radii, values, excluded, first, foreign),
  )
  const light = new Float32Array(values.length)
  for (let i = 0; i < light.length; i++) light[i] = profile.at(radii[i])
  return { geometry, profile, light }
}
