/** What the telescope adds: diffraction spikes and bleeding columns of bright stars, trails of satellites. */
import type { SeededRandom } from '../seeded-random'
import { distantBlueColour, magnitudesOf } from './colours'
import { composeElliptical } from './galaxy-scenes'
import type { Scene } from './scene'

/** Changes a blurred, noise-free canvas of one band in place. */
export type Artefact = (canvas: Float64Array, bandIndex: number) => void

/** Flux at which a pixel of the detector is full, in flux units of the survey. */
const FULL_WELL = 12000

/** A bright star in the field, or one outside whose spike runs past a galaxy. Returns what the detector makes of it. */
export function composeStarSpikes(scene: Scene, random: SeededRandom): Artefact {
  const outside = random.chance(0.4)
  const half = (scene.survey.width * scene.survey.pixelScaleArcsec) / 2
  const side = random.chance(0.5) ? 1 : -1
  const tilt = (random.between(-4, 4) * Math.PI) / 180
  const x = outside ? side * (half + random.between(0.5, 4)) : random.between(-1.2, 1.2)
  const y = outside ? random.between(-2.6, 2.6) : random.between(-1.2, 1.2)
  const magnitude = outside ? random.between(11.5, 13.5) : random.between(13.2, 16.8)
  const temperature = random.uniform()
  const colour = { gMinusR: 0.25 + 0.9 * temperature, rMinusI: 0.08 + 0.5 * temperature }
  const fluxes = scene.fluxesOf(magnitudesOf(scene.survey, magnitude, colour))
  scene.points.push({ x, y, fluxes })
  if (outside) composeElliptical(scene, random)
  return (canvas, bandIndex) => {
    addSpikes(canvas, scene, { x, y, flux: fluxes[bandIndex], tilt })
    saturate(canvas, scene)
  }
}

interface Spikes {
  x: number
  y: number
  flux: number
  tilt: number
}

/** Four arms at right angles, each with about 0.4 % of the light, falling with distance and a little wider outwards. */
function addSpikes(canvas: Float64Array, scene: Scene, { x, y, flux, tilt }: Spikes): void {
  const cos = Math.cos(tilt)
  const sin = Math.sin(tilt)
  const area = scene.survey.pixelScaleArcsec ** 2
  for (let row = 0; row < scene.height; row++) {
    for (let column = 0; column < scene.width; column++) {
      const dx = scene.xOf(column) - x
      const dy = scene.yOf(row) - y
      const u = dx * cos + dy * sin
      const v = dy * cos - dx * sin
      canvas[row * scene.width + column] += flux * area * (spike(u, v) + spike(v, u))
    }
  }
}

function spike(along: number, across: number): number {
  const distance = Math.abs(along)
  const width = 0.24 + 0.02 * distance
  const profile = Math.exp(-((across / width) ** 2) / 2) / (width * Math.sqrt(2 * Math.PI))
  return (0.008 * profile * Math.exp(-distance / 9)) / (1 + distance) ** 1.6
}

/** Full pixels stop at the full well and spill along their column until the charge is used up. */
function saturate(canvas: Float64Array, scene: Scene): void {
  for (let column = 0; column < scene.width; column++) {
    let excess = 0
    let lowest = -1
    let highest = -1
    for (let row = 0; row < scene.height; row++) {
      const i = row * scene.width + column
      if (canvas[i] <= FULL_WELL) continue
      excess += canvas[i] - FULL_WELL
      canvas[i] = FULL_WELL
      if (lowest < 0) lowest = row
      highest = row
    }
    // Half the charge is lost to the readout's protection; the rest fills the column up and down in turn.
    for (let charge = excess / 2; charge > 0 && lowest >= 0 && (lowest > 0 || highest < scene.height - 1);) {
      for (const row of [--lowest, ++highest]) {
        if (row < 0 || row >= scene.height || charge <= 0) continue
        const i = row * scene.width + column
        const room = Math.min(charge, FULL_WELL - canvas[i])
        canvas[i] += room
        charge -= room
      }
      lowest = Math.max(0, lowest)
      highest = Math.min(scene.height - 1, highest)
    }
  }
}

/** A galaxy with a trail across: strong in the one band whose exposure it crossed, nearly rejected in the others. */
export function composeSatelliteTrail(scene: Scene, random: SeededRandom): Artefact {
  composeElliptical(scene, random)
  if (random.chance(0.3)) {
    const at = { x: random.between(-3, 3), y: random.between(-3, 3) }
    scene.points.push({ ...at, fluxes: scene.fluxesOf(magnitudesOf(scene.survey, 22, distantBlueColour(random))) })
  }
  const angle = random.between(0, Math.PI)
  const passing = random.between(-2.8, 2.8)
  const struck = random.integer(0, scene.survey.bands.length - 1)
  const strength = random.between(4, 20)
  const twin = random.chance(0.2) ? random.between(1.5, 4) : null
  return (canvas, bandIndex) => {
    const { skyNoise, seeingArcsec } = scene.survey.bands[bandIndex]
    const peak = strength * skyNoise * (bandIndex === struck ? 1 : 0.12)
    for (let row = 0; row < scene.height; row++) {
      for (let column = 0; column < scene.width; column++) {
        const across = scene.yOf(row) * Math.cos(angle) - scene.xOf(column) * Math.sin(angle) - passing
        canvas[row * scene.width + column] += peak * trail(across, seeingArcsec)
        if (twin !== null) canvas[row * scene.width + column] += 0.6 * peak * trail(across - twin, seeingArcsec)
      }
    }
  }
}

/** Across a trail the light has the seeing's width, somewhat more for a satellite out of focus. */
function trail(across: number, seeingArcsec: number): number {
  const sigma = (1.05 * seeingArcsec) / 2.3548
  return Math.exp(-((across / sigma) ** 2) / 2)
}
