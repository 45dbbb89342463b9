import type { SkyCone } from '@/lib/work/catalogue/table-input'
import { CoordinateError, parseDeclination, parseRightAscension } from '@/lib/science/sky/coordinates'
import { coneHalfWidthDeg, type SkyPosition } from '@/lib/science/sky/separation'

/** The fields of a cone: round which position, and how far from it. */
export const REGION_FIELDS = ['near', 'within'] as const
export type RegionField = (typeof REGION_FIELDS)[number]

export interface ReadRegion {
  /** Only where both fields can be read. */
  cone: SkyCone | null
  problems: Partial<Record<RegionField, string>>
}

/** A field that cannot be read, or stands without the other, is no region: everything passes, and the field says why. */
export function readRegion(filters: Readonly<Record<string, string>>): ReadRegion {
  const near = filters.near?.trim() ?? ''
  const within = filters.within?.trim() ?? ''
  const problems: ReadRegion['problems'] = {}
  let position: SkyPosition | null = null
  let radiusArcsec: number | null = null
  try {
    if (near) position = parsePosition(near)
  } catch (error) {
    if (!(error instanceof CoordinateError)) throw error
    problems.near = error.message
  }
  if (within) {
    radiusArcsec = parseRadius(within)
    if (radiusArcsec === null) problems.within = `“${within}” is no radius. Write 30 arcsec, 5 arcmin or 0.5 deg.`
    else if (radiusArcsec > 648000) problems.within = 'A radius is at most 180 degrees: half the sky away.'
  } else if (near && !problems.near) problems.within = 'Say how far from the position: 30 arcsec, 5 arcmin or 0.5 deg.'
  if (within && !near) problems.near = 'Say round which position: 150.1 2.2, or 10:00:24 +02:12:00.'
  const known = position && radiusArcsec !== null && !problems.within && !problems.near
  return {
    cone: known
      ? { ...position!, radiusArcsec: radiusArcsec!, halfWidthDeg: coneHalfWidthDeg(position!.decDeg, radiusArcsec!) }
      : null,
    problems,
  }
}

const DESIGNATION = /J(\d{2})(\d{2})(\d{2}(?:\.\d+)?)([+-]\d{2})(\d{2})(\d{2}(?:\.\d+)?)\b/i

/** `150.1 2.2`, `150.1, +2.2`, `10:00:24 +02:12:00`, `10h00m24s +02d12m00s`, or a name such as J100024.00+021200.0. @throws CoordinateError */
export function parsePosition(text: string): SkyPosition {
  const plain = text.trim().replace(/[−–]/g, '-')
  const named = DESIGNATION.exec(plain)
  const [ra, dec] = named
    ? [`${named[1]}:${named[2]}:${named[3]}`, `${named[4]}:${named[5]}:${named[6]}`]
    : (split(plain) ?? ['', ''])
  if (!ra || !dec) {
    throw new CoordinateError(`“${text}” is no position. Write 150.1 2.2 in degrees, or 10:00:24 +02:12:00.`)
  }
  return { raDeg: parseRightAscension(ra), decDeg: parseDeclination(dec) }
}

function split(text: string): [string, string] | null {
  const signed = /^([^,;]+?)\s*[,;]?\s*([+-].+)$/.exec(text)
  if (signed) return [signed[1], signed[2]]
  const parted = text.split(/\s*[,;]\s*/)
  if (parted.length === 2) return [parted[0], parted[1]]
  const words = text.split(/\s+/)
  if (words.length % 2 !== 0) return null
  return [words.slice(0, words.length / 2).join(' '), words.slice(words.length / 2).join(' ')]
}

const UNITS: [RegExp, number][] = [
  [/^(?:"|″|”|''|arcsec(?:onds?)?|as)?$/i, 1],
  [/^(?:'|′|’|arcmin(?:utes?)?|am)$/i, 60],
  [/^(?:°|d|deg|degrees?)$/i, 3600],
]

/** Arcsec; a number without a unit is arcsec. Null for what is no radius. */
export function parseRadius(text: string): number | null {
  const match = /^(\d+(?:\.\d*)?|\.\d+)\s*(\D*)$/.exec(text.trim())
  const unit = match && UNITS.find(([form]) => form.test(match[2].trim()))
  return match && unit ? Number(match[1]) * unit[1] : null
}

/** `30 arcsec`, `5 arcmin`, `0.5 deg`: in the unit that makes a small number. */
export function radiusInWords(radiusArcsec: number): string {
  const [size, unit] = radiusArcsec < 120 ? [1, 'arcsec'] : radiusArcsec < 7200 ? [60, 'arcmin'] : [3600, 'deg']
  return `${Number((radiusArcsec / size).toPrecision(3))} ${unit}`
}
