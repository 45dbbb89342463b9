/** What a header tells of the unit of its pixels, and the fluxes of a source of a colour in such units. */
import type { FitsHeader } from '@/lib/science/fits/fits-types'
import { magnitudesOf, type Colour } from '../simulator/colours'
import { SALTMARSH_WIDE_SURVEY } from '../survey-model'

const GAIN_KEYWORDS = ['GAIN', 'EGAIN', 'CCDGAIN']
/** Only of counts does a gain say how many electrons a unit is; of a calibrated flux it does not. */
const COUNTS = /^(|adu|dn|counts?|ct)$/i
const MOST_GAIN = 1e6

/** Electrons per unit of the pixels; null where the header does not tell. */
export function electronsPerUnit(header: FitsHeader): number | null {
  const unit = String(header.BUNIT ?? '').trim()
  if (/^(electrons?|e-|photons?)$/i.test(unit)) return 1
  if (!COUNTS.test(unit)) return null
  const gain = GAIN_KEYWORDS.map((keyword) => header[keyword]).find((value) => typeof value === 'number' && value > 0)
  return typeof gain === 'number' && gain <= MOST_GAIN ? gain : null
}

/** Common keywords for the magnitude of a flux of 1; no standard has them. */
const ZERO_POINT_KEYWORDS = ['MAGZERO', 'MAGZPT', 'MAGZP', 'PHOTZP', 'ZEROPNT', 'ZPT', 'ZP']
const LIKELY_ZERO_POINT = [10, 40] as const

function zeroPointOf(header: FitsHeader): number | null {
  const found = ZERO_POINT_KEYWORDS.map((keyword) => header[keyword]).find(
    (value): value is number =>
      typeof value === 'number' && value >= LIKELY_ZERO_POINT[0] && value <= LIKELY_ZERO_POINT[1],
  )
  return found ?? null
}

/** Fluxes in the bands, to one common factor. */
export function relativeFluxes(
  planes: readonly { band: string; header: FitsHeader }[],
  colour: Colour,
): { fluxes: number[]; zeroPoints: 'header' | 'taken as equal' } {
  const bands = planes.map(({ band }) => ({ ...SALTMARSH_WIDE_SURVEY.bands[0], band: band.toLowerCase() }))
  const magnitudes = magnitudesOf({ ...SALTMARSH_WIDE_SURVEY, bands }, 0, colour)
  const told = planes.map(({ header }) => zeroPointOf(header))
  const all = told.every((zeroPoint) => zeroPoint !== null)
  const fluxes = magnitudes.map(
    (magnitude, k) => 10 ** (0.4 * ((all ? (told[k] ?? 0) - (told[0] ?? 0) : 0) - magnitude)),
  )
  return { fluxes, zeroPoints: all ? 'header' : 'taken as equal' }
}
