/** What a person sets with Light. Numbers are in units of the sky noise; null leaves the recipe's own. */
import type { Curve } from '@/lib/science/imaging/draw-sheet'

export interface ViewLight {
  black: number | null
  white: number | null
  softening: number | null
}

export type Limit = keyof ViewLight

export interface LightSettings {
  /** By family of views: all band views are set together, as their limits in the recipe are. */
  views: Record<string, ViewLight>
  curve: Curve
  /** Factors on the recipe's weights of the bands in colour, by band. */
  weights: Record<string, number>
  invert: boolean
}

export const PLAIN_LIGHT: LightSettings = { views: {}, curve: 'asinh', weights: {}, invert: false }
export const PLAIN_VIEW: ViewLight = { black: null, white: null, softening: null }

export const familyOf = (view: string): string => (view.startsWith('band:') ? 'band' : view)

export const isPlain = ({ views, curve, weights, invert }: LightSettings): boolean =>
  curve === 'asinh' &&
  !invert &&
  Object.values(weights).every((weight) => weight === 1) &&
  Object.values(views).every(({ black, white, softening }) => black === null && white === null && softening === null)

const CURVE_NAMES = ['asinh', 'log', 'sqrt', 'linear']

const numbersOf = (value: unknown, least: number, most: number): Record<string, number> =>
  Object.fromEntries(
    Object.entries(value ?? {}).flatMap(([name, one]) =>
      typeof one === 'number' && one >= least && one <= most ? [[name, one]] : [],
    ),
  )

/** Settings out of a browser's storage, where anybody may have written anything: what does not fit is left out. */
export function settingsFrom(stored: unknown): LightSettings {
  if (typeof stored !== 'object' || stored === null) return PLAIN_LIGHT
  const { views, curve, weights, invert } = stored as Record<string, unknown>
  return {
    views: Object.fromEntries(
      Object.entries(typeof views === 'object' ? (views ?? {}) : {}).map(([family, one]) => {
        const { black, white, softening } = numbersOf(one, -1e6, 1e6)
        return [family, { black: black ?? null, white: white ?? null, softening: softening > 0 ? softening : null }]
      }),
    ),
    curve: CURVE_NAMES.includes(curve as Curve) ? (curve as Curve) : 'asinh',
    weights: numbersOf(weights, 0, 10),
    invert: invert === true,
  }
}
