/** What the sliders of the recipe cover. A slider has 200 places; `log` spreads them evenly over factors. */
import type { AnyLimits } from './recipe-draft'

export interface LimitScale {
  name: keyof AnyLimits
  label: string
  hint: string
  unit: string
  least: number
  most: number
  log?: boolean
  digits: number
}

export const PLACES = 200

export const LIMIT_SCALES: LimitScale[] = [
  {
    name: 'blackSigma',
    label: 'Black',
    hint: 'This far above the sky is black.',
    unit: 'σ',
    least: -5,
    most: 10,
    digits: 2,
  },
  {
    name: 'softeningSigma',
    label: 'Softening',
    hint: 'Linear below, logarithmic above: small lifts what is faint.',
    unit: 'σ',
    least: 0.2,
    most: 200,
    log: true,
    digits: 2,
  },
  {
    name: 'whitePercentile',
    label: 'White follows',
    hint: 'The value that this share of the pixels stays below.',
    unit: '%',
    least: 90,
    most: 100,
    digits: 2,
  },
  {
    name: 'leastWhiteSigma',
    label: 'but at least',
    hint: 'So that bare noise stays dark.',
    unit: 'σ',
    least: 2,
    most: 1000,
    log: true,
    digits: 1,
  },
  {
    name: 'mostWhiteSigma',
    label: 'and at most',
    hint: 'So that a bright star does not hide all else.',
    unit: 'σ',
    least: 5,
    most: 50_000,
    log: true,
    digits: 0,
  },
  {
    name: 'hueFromSigma',
    label: 'Colour from',
    hint: 'Fainter pixels fade to grey: noise has no hue.',
    unit: 'σ',
    least: 0,
    most: 10,
    digits: 2,
  },
  {
    name: 'saturation',
    label: 'Saturation',
    hint: '0 is grey, 1 as measured.',
    unit: '×',
    least: 0,
    most: 3,
    digits: 2,
  },
]

export const WEIGHT_SCALE = { least: 0.1, most: 10, log: true, digits: 2 }
export const CLOSE_FIELD_SCALE = { least: 2, most: 60, log: true, digits: 1 }

type Span = Pick<LimitScale, 'least' | 'most' | 'log' | 'digits'>

/** Place of a value on its slider, 0 to PLACES; a value beyond an end stands at the end. */
export function placeOf(value: number, { least, most, log }: Span): number {
  const inside = Math.min(most, Math.max(least, value))
  const share = log ? Math.log(inside / least) / Math.log(most / least) : (inside - least) / (most - least)
  return Math.round(PLACES * share)
}

export function valueAt(place: number, { least, most, log, digits }: Span): number {
  const share = place / PLACES
  const value = log ? least * (most / least) ** share : least + share * (most - least)
  return Number(value.toFixed(digits))
}
