/** How hard a simulated candidate is to judge, 0 to 1. */
import type { SeededRandom } from '../seeded-random'
import type { ImpostorKind } from './kinds'
import { blurredScene } from './observe-scene'
import type { Scene } from './scene'

/** Lens light is never known better than this share of itself, so arcs drown in it whatever the exposure. */
const LENS_LIGHT_DOUBT = 0.08
const HARD_AT = 15
const EASY_AT = 400

/**
 * Signal-to-noise of the lensed light in the shortest band, where it stands out best, optimally weighted over pixels:
 *   S/N^2 = sum arc^2 / (sky^2 + (arc + lens) / gain + (0.08 lens)^2)
 * 1 at S/N 15 and below, 0 at 400 and above, straight in the logarithm between (our own scale).
 */
export function arcDifficulty(scene: Scene): number {
  const { skyNoise, electronsPerFlux } = scene.survey.bands[0]
  const arc = blurredScene(scene, 0, (layer) => layer.isLensed)
  const lens = blurredScene(scene, 0, (layer) => !layer.isLensed)
  let square = 0
  for (let i = 0; i < arc.length; i++) {
    const variance = skyNoise ** 2 + (arc[i] + lens[i]) / electronsPerFlux + (LENS_LIGHT_DOUBT * lens[i]) ** 2
    square += arc[i] ** 2 / variance
  }
  const easiness = Math.log(Math.sqrt(square) / HARD_AT) / Math.log(EASY_AT / HARD_AT)
  return 1 - Math.min(1, Math.max(0, easiness))
}

const CONFUSION: Record<ImpostorKind, number> = {
  'ring-galaxy': 0.7,
  spiral: 0.5,
  merger: 0.55,
  'edge-on': 0.4,
  elliptical: 0.3,
  'satellite-trail': 0.15,
  'star-spikes': 0.1,
}

export function impostorDifficulty(kind: ImpostorKind, random: SeededRandom): number {
  return Math.min(1, Math.max(0, CONFUSION[kind] + random.between(-0.2, 0.2)))
}
