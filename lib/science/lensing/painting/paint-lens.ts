/**
 * A lensed source painted over a real galaxy's cutouts, so that a calibration stamp has everything that a candidate has: the galaxy,
 * its neighbours, the artefacts and the noise are real, only the lensed light is ours. The mass is a singular isothermal ellipsoid
 * with shear that follows the galaxy's light; the source is a Sersic profile, blue as a star-forming galaxy behind a lens is.
 *
 * Noise: the sky's stays as it is, untouched. Photons of the painted light bring their own (Poisson) noise only where the header
 * tells how many electrons a unit of the pixels is; elsewhere the light is added smooth, and the truth says so.
 */
import type { FitsHeader } from '@/lib/science/fits/fits-types'
import { subtractLensLight, type LensLightModel } from '@/lib/science/imaging/lens-light'
import { estimateNoise } from '@/lib/science/imaging/noise'
import type { Wcs } from '@/lib/science/sky/wcs'
import type { SeededRandom } from '../seeded-random'
import { pointImages } from '../sie-shear-images'
import { lensModel } from '../sie-shear'
import { arcsOf, type PaintedArc } from './arcs'
import { electronsPerUnit, relativeFluxes } from './calibration'
import { lensedLight } from './lensed-light'
import { drawPainting, type MeasuredEllipse, type Painting, type PaintingRanges } from './painting-ranges'
import { seeingOf, type Seeing } from './seeing'
import { plainGrid, positionAngleOf, samePlace, skyGrid, type SkyGrid } from './sky-grid'

export interface PlaneToPaint {
  band: string
  width: number
  height: number
  /** Row 0 is the bottom row. */
  data: Float32Array
  wcs: Wcs | null
  /** Where there is no WCS it must be given. */
  pixelScaleArcsec: number | null
  header: FitsHeader
}

export interface PaintedBand {
  band: string
  seeingArcsec: number
  seeingFrom: Seeing['from']
  /** null: not known, so the painted light has no noise of its own. */
  electronsPerUnit: number | null
  /** Of the source as it would be without its lens, and of its lensed light in the picture, in the unit of the pixels. */
  sourceFlux: number
  lensedFlux: number
  /** Of the lensed light against the sky's noise. */
  signalToNoise: number
}

/** What was painted, as kept with the stamp. */
export interface PaintingTruth extends Painting {
  galaxy: MeasuredEllipse
  bands: PaintedBand[]
  /** 'taken as equal': not every header has a zero point, so one unit is taken for the same AB flux in all bands. */
  zeroPoints: 'header' | 'taken as equal'
  /** Lensed light over the light of the source without its lens, of what falls on the picture. */
  magnification: number
  /** Images of the middle of the source. */
  images: { east: number; north: number; magnification: number }[]
  /** The middle of the galaxy from the middle of the picture. */
  middle: { east: number; north: number }
  /** Where the light is, for a mark over the picture. */
  arcs: PaintedArc[]
}

export interface PaintedPlanes {
  planes: { band: string; data: Float32Array }[]
  truth: PaintingTruth
}

/** A galaxy that cannot be painted over. The message is a sentence for people. */
export class PaintingError extends Error {
  readonly name = 'PaintingError'
}

/** The galaxy in the middle of the first usable band, as its light shows it. */
export interface GalaxyToPaint extends MeasuredEllipse {
  grids: SkyGrid[]
  model: LensLightModel
}

/** Einstein radii up to this share of the shorter side stay in the picture with their images. */
const MOST_SHARE = 0.32

/** @throws PaintingError where there is no galaxy to be measured, its core is saturated, or the scale of the picture is not known. */
export function measureGalaxy(planes: readonly PlaneToPaint[]): GalaxyToPaint {
  const bands = planes.map(({ band, width, height, data }) => ({ band, width, height, data }))
  const { model, residuals } = subtractLensLight(bands)
  // Where a core is saturated nothing is left of it.
  const lost = residuals.some(({ data }, k) =>
    data.some((value, i) => value !== value && Number.isFinite(bands[k].data[i])),
  )
  if (lost) throw new PaintingError('Its middle is saturated, as of a bright star.')
  const measured = model && planes.find(({ band }) => band in model.light)
  if (!measured) throw new PaintingError('There is no galaxy in the middle that is bright enough to be measured.')
  const grid = gridOf(measured, model.x, model.y)
  const grids = planes.map((plane) => {
    if (plane === measured || plane.wcs === null || measured.wcs === null) return gridOf(plane, model.x, model.y)
    const { x, y } = samePlace(measured.wcs, grid, plane.wcs)
    return gridOf(plane, x, y)
  })
  if (planes.some(({ wcs }) => (wcs === null) !== (measured.wcs === null))) {
    throw new PaintingError('Some of its bands have a position on the sky and some have none.')
  }
  return { axisRatio: model.axisRatio, positionAngleDeg: positionAngleOf(grid, model.angleDeg), grids, model }
}

function gridOf({ band, wcs, pixelScaleArcsec }: PlaneToPaint, x: number, y: number): SkyGrid {
  const grid = wcs ? skyGrid(wcs, x, y) : pixelScaleArcsec ? plainGrid(x, y, pixelScaleArcsec) : null
  if (grid) return grid
  throw new PaintingError(`The pixel scale of band ${band} is not known.`)
}

/**
 * The same planes, ranges and generator give the same pixels. Planes in order of wavelength, shortest first.
 * @throws PaintingError as `measureGalaxy`, and where the cutout is too small for the smallest Einstein radius.
 */
export function paintLens(
  planes: readonly PlaneToPaint[],
  ranges: PaintingRanges,
  random: SeededRandom,
): PaintedPlanes {
  const galaxy = measureGalaxy(planes)
  const [least, most] = ranges.einsteinRadiusArcsec
  const room = Math.min(...planes.map((plane, k) => MOST_SHARE * shorterSide(plane, galaxy.grids[k])))
  if (least > room) {
    throw new PaintingError(`Its cutout has room for Einstein radii up to ${room.toFixed(1)} arcsec only.`)
  }
  const within = { ...ranges, einsteinRadiusArcsec: [least, Math.min(most, room)] as const }
  return paint(planes, galaxy, drawPainting(within, galaxy, random), random)
}

const shorterSide = ({ width, height }: PlaneToPaint, { a, b, c, d }: SkyGrid): number =>
  Math.min(width * Math.hypot(a, c), height * Math.hypot(b, d))

/** Paints one lens that has been drawn, or chosen. */
export function paint(
  planes: readonly PlaneToPaint[],
  galaxy: GalaxyToPaint,
  painting: Painting,
  random: SeededRandom,
): PaintedPlanes {
  const { fluxes, zeroPoints } = relativeFluxes(planes, painting.colour)
  const traces = new Map<string, Float64Array>()
  const lights = planes.map((plane, k) => {
    const seeing = seeingOf({ ...plane, pixelScaleArcsec: scaleOf(galaxy.grids[k]) }, galaxy.grids[k])
    const light = lensedLight(painting, galaxy.grids[k], plane, seeing.arcsec, traces)
    const { sigma } = estimateNoise(plane.data, plane.width, plane.height)
    return { plane, seeing, light, signalPerFlux: sigma > 0 ? Math.sqrt(sumOfSquares(light)) / sigma : 0 }
  })
  const shown = lights.map(({ signalPerFlux }, k) => signalPerFlux * fluxes[k])
  const best = shown.indexOf(Math.max(...shown))
  if (!(shown[best] > 0)) throw new PaintingError('None of its bands shows any sky, so there is no noise to go by.')
  const amplitude = painting.arcSignalToNoise / shown[best]
  const painted = lights.map(({ plane, seeing, light }, k) => {
    const electrons = electronsPerUnit(plane.header)
    const flux = amplitude * fluxes[k]
    const share = light.reduce((sum, value) => sum + value, 0)
    const band: PaintedBand = {
      band: plane.band,
      seeingArcsec: seeing.arcsec,
      seeingFrom: seeing.from,
      electronsPerUnit: electrons,
      sourceFlux: flux,
      lensedFlux: flux * share,
      signalToNoise: amplitude * shown[k],
    }
    return { band, share, data: withLight(plane.data, light, flux, electrons, random) }
  })
  const { axisRatio, positionAngleDeg } = galaxy
  const truth: PaintingTruth = {
    ...painting,
    galaxy: { axisRatio, positionAngleDeg },
    bands: painted.map(({ band }) => band),
    zeroPoints,
    magnification: painted[best].share,
    images: pointImages(lensModel(painting), painting.source).map(({ east, north, magnification }) => ({
      east,
      north,
      magnification,
    })),
    middle: middleOf(galaxy.grids[best], lights[best].plane),
    arcs: arcsOf(lights[best].light, lights[best].plane, galaxy.grids[best], painting.einsteinRadiusArcsec),
  }
  return { planes: painted.map(({ band, data }) => ({ band: band.band, data })), truth }
}

function middleOf({ x, y, a, b, c, d }: SkyGrid, { width, height }: PlaneToPaint): { east: number; north: number } {
  const [dx, dy] = [x - (width - 1) / 2, y - (height - 1) / 2]
  return { east: a * dx + b * dy, north: c * dx + d * dy }
}

const scaleOf = ({ a, b, c, d }: SkyGrid): number => Math.sqrt(Math.abs(a * d - b * c))

function sumOfSquares(values: Float64Array): number {
  let sum = 0
  for (const value of values) sum += value * value
  return sum
}

/** Pixels without a value keep none. */
function withLight(
  data: Float32Array,
  light: Float64Array,
  flux: number,
  electrons: number | null,
  random: SeededRandom,
): Float32Array {
  return data.map((value, i) => {
    const added = flux * light[i]
    return value + (electrons === null ? added : random.poisson(added * electrons) / electrons)
  })
}
