/** Places on sliders: fine where it matters, wide enough for the brightest cores. Values in units of the noise. */
export interface SliderScale {
  /** 0 to STEPS. */
  place(value: number): number
  value(place: number): number
  figure(value: number): string
}

export const STEPS = 400

const clamp = (place: number) => Math.max(0, Math.min(STEPS, place))

function logarithmic(least: number, most: number): Omit<SliderScale, 'figure'> {
  const reach = Math.log(most / least)
  return {
    place: (value) => clamp(Math.round((STEPS * Math.log(Math.max(value, least) / least)) / reach)),
    value: (place) => least * Math.exp((reach * place) / STEPS),
  }
}

/** Straight around 0, logarithmic on both sides. */
function symmetric(least: number, most: number, softening: number): Omit<SliderScale, 'figure'> {
  const from = Math.asinh(least / softening)
  const reach = Math.asinh(most / softening) - from
  return {
    place: (value) => clamp(Math.round((STEPS * (Math.asinh(value / softening) - from)) / reach)),
    value: (place) => softening * Math.sinh(from + (reach * place) / STEPS),
  }
}

/** One decimal below 10, with a true minus sign. */
export function sigmaFigure(value: number): string {
  const size = Math.abs(value)
  const text = size < 9.95 ? size.toFixed(1) : Math.round(size).toLocaleString('en')
  return `${value < 0 && text !== '0.0' ? '−' : ''}${text}σ`
}

export const BLACK_SCALE: SliderScale = { ...symmetric(-10, 100, 2), figure: sigmaFigure }
export const WHITE_SCALE: SliderScale = { ...logarithmic(1, 30_000), figure: sigmaFigure }
export const SOFTENING_SCALE: SliderScale = { ...logarithmic(0.2, 300), figure: sigmaFigure }
export const WEIGHT_SCALE: SliderScale = {
  place: (value) => clamp(Math.round((STEPS * value) / 3)),
  value: (place) => (3 * place) / STEPS,
  figure: (value) => `×${value.toFixed(2)}`,
}
