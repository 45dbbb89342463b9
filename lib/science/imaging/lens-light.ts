/**
 * The light of the galaxy in the middle, modelled and taken off, so that arcs remain.
 *
 * The model: brightness along ellipses about one centre, their shape going from the core's to that outside; along the radius
 * a sum of Gaussians that are not negative (see gaussian-profile.ts), so that it only ever falls and a ring of light is not
 * taken for the galaxy. The ellipses come from all bands together, weighted by the galaxy's own brightness, which is mostly
 * the red ones; each band then has its own brightness and small shifts of its own. Light bluer than the core is told apart
 * by colour before anything is modelled; light above the model is left out round by round.
 *
 * Like the B-spline models of A. Bolton et al., ApJ 638, 703 (2006), but without masks drawn by hand. Measured by
 * tests/bench/bench-lens-light.ts.
 */
import { findCore, type Core } from './lens-light/find-core'
import { fitGalaxy, type GalaxyLight } from './lens-light/fit-galaxy'
import { ABOVE } from './lens-light/profile-rows'
import { normalisePlane, type BandPlane, type NormalisedPlane } from './normalise-planes'

export interface LensLightModel {
  /** Centre, pixels from the middle of the bottom left pixel. */
  x: number
  y: number
  /** Minor over major half-axis, and position angle from +x towards +y in degrees [0, 180), far from the core, seeing included. */
  axisRatio: number
  angleDeg: number
  /** Light taken off, row 0 = bottom, in the unit of the plane, by band. */
  light: Record<string, Float32Array>
}

export interface LensLightRemoval {
  /** The planes, in their order, without the galaxy's light; NaN where there is no data or the core is saturated. */
  residuals: BandPlane[]
  /** null when nothing was taken off. */
  model: LensLightModel | null
  /** What a viewer must know, in a sentence or two; null when nothing. */
  note: string | null
}

/** Smaller than this, pixels a side, there is no sky round a galaxy to tell it from. */
const LEAST_SIDE = 20
/** Mean brightness of the core, in units of the noise of one pixel, from which a galaxy can be modelled. */
const LEAST_CORE = 4

/**
 * @param planes shortest wavelength first, row 0 = bottom. One model is made for the planes of the commonest size (the
 *   first such); others come back as they are and the note names them, as do planes without anything to see.
 * Never throws when each plane has width x height pixels.
 */
export function subtractLensLight(planes: BandPlane[]): LensLightRemoval {
  const normalised = planes.map(normalisePlane)
  const usable = normalised.filter((plane) => plane.state === 'usable')
  const group = usable.filter((plane) => plane.width === usable[0].width && plane.height === usable[0].height)
  const removed = removeLensLight(group)
  const residuals = planes.map((plane, k) => {
    const at = group.indexOf(normalised[k])
    const light = removed.galaxy?.bands[at]?.light
    if (!light) return plane
    const data = Float32Array.from(plane.data, (value, i) => value - normalised[k].sigma * light[i])
    for (const i of removed.galaxy?.saturated[at] ?? []) data[i] = Number.NaN
    return { ...plane, data, sky: undefined }
  })
  const left = usable.filter((plane) => !group.includes(plane)).map((plane) => plane.band)
  const leftNote = left.length > 0 ? `Band ${left.join(', ')} differs in size and is shown as it is.` : null
  return {
    residuals,
    model: removed.galaxy ? describe(removed.galaxy, group) : null,
    note: [removed.note, leftNote].filter(Boolean).join(' ') || null,
  }
}

function describe({ geometry, bands }: GalaxyLight, group: NormalisedPlane[]): LensLightModel {
  const [e1, e2] = geometry.outer
  const e = Math.hypot(e1, e2)
  return {
    x: geometry.x,
    y: geometry.y,
    axisRatio: (1 - e) / (1 + e),
    angleDeg: ((Math.atan2(e2, e1) * 90) / Math.PI + 180) % 180,
    light: Object.fromEntries(group.map(({ band, sigma }, k) => [band, bands[k].light.map((value) => value * sigma)])),
  }
}

export interface RemovedLight {
  galaxy: GalaxyLight | null
  /** The planes without the galaxy's light, in units of the noise. */
  residuals: NormalisedPlane[]
  note: string | null
}

/** The same for planes in units of their noise, all usable and of one size; none gives none. */
export function removeLensLight(planes: NormalisedPlane[]): RemovedLight {
  const unchanged = (note: string): RemovedLight => ({ galaxy: null, residuals: planes, note })
  if (planes.length === 0) return { galaxy: null, residuals: [], note: null }
  const { width, height } = planes[0]
  if (Math.min(width, height) < LEAST_SIDE) {
    return unchanged(`Too small to model a galaxy (${width} x ${height} pixels): shown as it is.`)
  }
  const core = findCore(planes)
  if (core === null || !isBright(core)) {
    return unchanged('No galaxy in the middle that is bright enough to model: shown as it is.')
  }
  const galaxy = fitGalaxy(planes, core)
  const residuals = planes.map((plane, k) => {
    const { light } = galaxy.bands[k]
    const before = plane.values
    const values = new Float32Array(light.length)
    for (let i = 0; i < values.length; i++) values[i] = before[i] - light[i]
    for (const i of galaxy.saturated[k]) values[i] = Number.NaN
    return { ...plane, values }
  })
  return { galaxy, residuals, note: noteOn(galaxy, planes, residuals) }
}

const isBright = ({ brightness }: Core): boolean =>
  Math.max(...brightness.filter((value) => value === value)) > LEAST_CORE

function brightest(values: Float32Array): number {
  let most = 0
  for (let i = 0; i < values.length; i++) if (values[i] > most) most = values[i]
  return most
}

/** A neighbour of at least this share of the core's brightness is named. */
const SECOND_SHARE = 0.4
/** Within this radius, pixels, the residual of a good model is noise; more than this share of the light is not. */
const CHECK_RADIUS = 5
const ROUGH_SHARE = 0.12

function noteOn(galaxy: GalaxyLight, planes: NormalisedPlane[], residuals: NormalisedPlane[]): string | null {
  const notes: string[] = []
  const full = planes.filter((_, k) => galaxy.saturated[k].length > 0).map((plane) => plane.band)
  if (full.length > 0) notes.push(`The core is saturated in ${full.join(', ')}: no data there, drawn as flat grey.`)
  const last = planes.length - 1
  const { geometry, excluded } = galaxy
  const { width, values } = residuals[last]
  const { light } = galaxy.bands[last]
  let second = 0
  let secondAt = 0
  let squares = 0
  let lights = 0
  let count = 0
  for (let i = 0; i < values.length; i++) {
    const value = values[i]
    if (value !== value) continue
    const dx = (i % width) - geometry.x
    const dy = ((i / width) | 0) - geometry.y
    // Not Math.hypot, which is many times slower and guards against overflows that cannot be here.
    const distance = Math.sqrt(dx * dx + dy * dy)
    if (excluded[i] === ABOVE && value > second && distance > CHECK_RADIUS) {
      second = value
      secondAt = distance
    }
    if (distance > CHECK_RADIUS) continue
    squares += value * value
    lights += light[i]
    count++
  }
  const rough = Math.sqrt(squares / Math.max(1, count))
  if (full.length === 0 && rough > 5 && rough * count > ROUGH_SHARE * lights) {
    notes.push('The middle is not one smooth galaxy: what remains there may be its own structure.')
  }
  if (second > 10 && second > SECOND_SHARE * brightest(light)) {
    notes.push(`A second bright object, ${Math.round(secondAt)} pixels from the centre, was left in.`)
  }
  return notes.join(' ') || null
}
