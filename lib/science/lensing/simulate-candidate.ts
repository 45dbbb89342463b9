/**
 * One simulated candidate: a lens or one of the things that are taken for lenses, as a survey would record it. The same
 * kind, seed and survey give the same pixels (on one JavaScript engine).
 */
import { SeededRandom } from './seeded-random'
import { composeSatelliteTrail, composeStarSpikes, type Artefact } from './simulator/artefact-scenes'
import { arcDifficulty, impostorDifficulty } from './simulator/difficulty'
import { addFieldGalaxies } from './simulator/field-galaxies'
import {
  composeEdgeOn,
  composeElliptical,
  composeMerger,
  composeRingGalaxy,
  composeSpiral,
} from './simulator/galaxy-scenes'
import { SIMULATED_KINDS, type ImpostorKind, type SimulatedKind } from './simulator/kinds'
import { composeLens } from './simulator/lens-scenes'
import { addPoints, blurredScene, cropCanvas, recordCutout } from './simulator/observe-scene'
import { Scene } from './simulator/scene'
import { SALTMARSH_WIDE_SURVEY, type SurveyModel } from './survey-model'

export type { SurveyModel } from './survey-model'

export { SIMULATED_KINDS, type ImpostorKind, type SimulatedKind } from './simulator/kinds'

export interface SimulatedCandidate {
  kind: SimulatedKind
  isLens: boolean
  /** Shortest wavelength first; row 0 is the bottom row; flux units of the survey's zero point, sky subtracted. */
  bands: { band: string; data: Float32Array }[]
  width: number
  height: number
  pixelScaleArcsec: number
  /** Of the main lens, circularised; null for what is not a lens. */
  einsteinRadiusArcsec: number | null
  /**
   * 0 easy to 1 hard. For a lens by the signal-to-noise of the lensed light against the lens galaxy's; for anything
   * else by how often its kind is taken for a lens (our own guess, no source).
   */
  difficulty: number
}

/** @param seed whole number. */
export function simulateCandidate(
  kind: SimulatedKind,
  seed: number,
  survey: SurveyModel = SALTMARSH_WIDE_SURVEY,
): SimulatedCandidate {
  return observe(kind, seed, survey).candidate
}

/** Light of one band without noise, rows as in the cutout, flux units of the survey. */
export interface TrueLight {
  band: string
  /** Of the galaxy in the middle: the lens, or the first part of whatever else stands there. */
  central: Float32Array
  /** From behind the lens: arcs, rings, images; all 0 for what is not a lens. */
  lensed: Float32Array
  /** Of everything else: neighbours, members, field galaxies, stars, artefacts. */
  others: Float32Array
}

/** The same candidate, pixel for pixel, with what it is made of. */
export function simulateWithTruth(
  kind: SimulatedKind,
  seed: number,
  survey: SurveyModel = SALTMARSH_WIDE_SURVEY,
): { candidate: SimulatedCandidate; truth: TrueLight[] } {
  const { candidate, scene, canvases } = observe(kind, seed, survey)
  const truth = survey.bands.map(({ band }, index) => {
    const central = cropCanvas(
      scene,
      blurredScene(scene, index, (layer) => layer === scene.layers[0]),
    )
    const lensed = cropCanvas(
      scene,
      blurredScene(scene, index, (layer) => layer.isLensed),
    )
    const others = cropCanvas(scene, canvases[index]).map((light, i) => light - central[i] - lensed[i])
    return { band, central, lensed, others }
  })
  return { candidate, truth }
}

function observe(kind: SimulatedKind, seed: number, survey: SurveyModel) {
  const random = new SeededRandom(seed * SIMULATED_KINDS.length + SIMULATED_KINDS.indexOf(kind))
  const scene = new Scene(survey)
  const composed = compose(kind, scene, random)
  addFieldGalaxies(scene, kind === 'lens-group' ? 2 : 3.2, random)
  const canvases: Float64Array[] = []
  const bands = survey.bands.map((band, index) => {
    const canvas = blurredScene(scene, index, () => true)
    addPoints(canvas, scene, index)
    composed.artefact?.(canvas, index)
    canvases.push(canvas)
    return { band: band.band, data: recordCutout(canvas, scene, band, random) }
  })
  const { width, height, pixelScaleArcsec } = survey
  const { einsteinRadiusArcsec } = composed
  const isLens = einsteinRadiusArcsec !== null
  const difficulty = isLens ? arcDifficulty(scene) : impostorDifficulty(kind as ImpostorKind, random)
  const candidate = { kind, isLens, bands, width, height, pixelScaleArcsec, einsteinRadiusArcsec, difficulty }
  return { candidate, scene, canvases }
}

interface Composed {
  einsteinRadiusArcsec: number | null
  artefact: Artefact | null
}

function compose(kind: SimulatedKind, scene: Scene, random: SeededRandom): Composed {
  const none = { einsteinRadiusArcsec: null, artefact: null }
  switch (kind) {
    case 'spiral':
      composeSpiral(scene, random)
      return none
    case 'ring-galaxy':
      composeRingGalaxy(scene, random)
      return none
    case 'merger':
      composeMerger(scene, random)
      return none
    case 'edge-on':
      composeEdgeOn(scene, random)
      return none
    case 'elliptical':
      composeElliptical(scene, random)
      return none
    case 'star-spikes':
      return { ...none, artefact: composeStarSpikes(scene, random) }
    case 'satellite-trail':
      return { ...none, artefact: composeSatelliteTrail(scene, random) }
    default:
      return { ...none, einsteinRadiusArcsec: composeLens(kind, scene, random) }
  }
}
