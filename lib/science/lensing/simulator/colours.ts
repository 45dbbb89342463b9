/**
 * Magnitudes in g, r, i from an i magnitude and two colours; bands of other surveys are reached by their place in
 * wavelength. Colours of galaxies with redshift: round numbers of passively evolving and star-forming galaxies (common
 * practice, from memory).
 */
import type { SeededRandom } from '../seeded-random'
import type { SurveyModel } from '../survey-model'

export interface Colour {
  gMinusR: number
  rMinusI: number
}

/** Redshift, g - r, r - i of quiescent galaxies. */
const QUIESCENT: [number, number, number][] = [
  [0.15, 1.0, 0.4],
  [0.25, 1.3, 0.5],
  [0.35, 1.55, 0.57],
  [0.45, 1.72, 0.7],
  [0.55, 1.78, 0.88],
  [0.65, 1.78, 1.05],
  [0.8, 1.7, 1.2],
]

export function quiescentColour(redshift: number): Colour {
  const last = QUIESCENT.length - 1
  const upper = Math.min(
    last,
    Math.max(
      1,
      QUIESCENT.findIndex(([z]) => z >= redshift),
    ),
  )
  const [z0, gr0, ri0] = QUIESCENT[upper - 1]
  const [z1, gr1, ri1] = QUIESCENT[upper]
  const share = Math.min(1, Math.max(0, (redshift - z0) / (z1 - z0)))
  return { gMinusR: gr0 + share * (gr1 - gr0), rMinusI: ri0 + share * (ri1 - ri0) }
}

/** A star-forming galaxy at redshift 1 to 3: nearly flat in flux. */
export function distantBlueColour(random: SeededRandom): Colour {
  return { gMinusR: random.between(-0.05, 0.35), rMinusI: random.between(-0.05, 0.25) }
}

export const YOUNG_STARS: Colour = { gMinusR: 0.1, rMinusI: 0.0 }
export const YOUNG_RING: Colour = { gMinusR: 0.25, rMinusI: 0.1 }
export const YOUNG_DISC: Colour = { gMinusR: 0.4, rMinusI: 0.2 }
export const OLD_DISC: Colour = { gMinusR: 0.65, rMinusI: 0.35 }
export const OLD_BULGE: Colour = { gMinusR: 0.95, rMinusI: 0.45 }

/** Effective wavelengths of the usual broad bands in nm (common practice, no source). */
const WAVELENGTH_NM: Record<string, number> = { u: 360, g: 480, r: 625, i: 760, z: 890, y: 970 }

/** Magnitudes in the survey's bands, straight lines in wavelength through and beyond g, r, i. */
export function magnitudesOf(survey: SurveyModel, iMagnitude: number, { gMinusR, rMinusI }: Colour): number[] {
  return survey.bands.map(({ band }, index) => {
    const spread = survey.bands.length > 1 ? (280 * index) / (survey.bands.length - 1) : 280
    const wavelength = WAVELENGTH_NM[band] ?? 480 + spread
    if (wavelength <= 625) return iMagnitude + rMinusI + (gMinusR * (625 - wavelength)) / 145
    return iMagnitude + (rMinusI * (760 - wavelength)) / 135
  })
}
