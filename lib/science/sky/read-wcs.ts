// The celestial WCS out of a header. Sources: papers I and II as in wcs.ts; FITS Standard 4.0, section 8; CROTA2 and units as in
// paper II, 6.1 and FITS 4.0, 4.3. CD stands over PC and CDELT; PC over CROTA2.
import type { FitsHeader } from '@/lib/science/fits/fits-types'
import type { SkyFrame } from '@/lib/science/sky/frames'
import type { Sip } from '@/lib/science/sky/sip'
import type { Wcs } from '@/lib/science/sky/wcs'

/** A celestial WCS that is broken or not supported. The message is one sentence a person can act on. */
export class WcsError extends Error {
  readonly name = 'WcsError'
}

const CELESTIAL = /^(RA--|DEC-|GLON|GLAT|ELON|ELAT|[A-Z]LON|[A-Z]LAT)-+([A-Z]{3})(-SIP)?$/
const DEGREES_PER_UNIT: Readonly<Record<string, number>> = {
  deg: 1,
  degree: 1,
  degrees: 1,
  arcmin: 1 / 60,
  arcsec: 1 / 3600,
  mas: 1 / 3600000,
  rad: 180 / Math.PI,
}

/**
 * null when axes 1 and 2 are not celestial: then there is no position and no scale, and none is invented.
 * @throws WcsError when they are, but keywords are missing, contradict each other or mean what is not read here.
 */
export function readWcs(header: FitsHeader): Wcs | null {
  const types = [1, 2].map((axis) =>
    CELESTIAL.exec(
      String(header[`CTYPE${axis}`] ?? '')
        .trim()
        .toUpperCase(),
    ),
  )
  const [first, second] = types
  if (first === null && second === null) {
    refuseCelestialElsewhere(header)
    return null
  }
  const names = `CTYPE1 = '${header.CTYPE1 ?? ''}' and CTYPE2 = '${header.CTYPE2 ?? ''}'`
  if (first === null || second === null)
    throw new WcsError(`The WCS has ${names}: only one of the two is a celestial axis.`)
  const [longitude, latitude] = isLongitude(first[1]) ? [1, 2] : [2, 1]
  const kind = first[1][0] === 'R' || first[1][0] === 'D' ? 'RA--DEC-' : first[1][0]
  const pair = longitude === 1 ? first[1] + second[1] : second[1] + first[1]
  if (first[2] !== second[2] || (pair !== 'RA--DEC-' && pair !== 'GLONGLAT' && pair !== `${kind}LON${kind}LAT`)) {
    throw new WcsError(`The WCS has ${names}, which do not belong together.`)
  }
  const projection = first[2]
  if (projection !== 'TAN' && projection !== 'SIN') {
    throw new WcsError(`The WCS uses the projection ${projection}; TAN and SIN are read. Resample the cutout to TAN.`)
  }
  const scales = [1, 2].map((axis) => unitScale(header, axis))
  const rows = linearMatrix(header).map((row, index) => row.map((value) => value * scales[index]) as [number, number])
  const matrix = [rows[longitude - 1], rows[latitude - 1]] as const
  const determinant = matrix[0][0] * matrix[1][1] - matrix[0][1] * matrix[1][0]
  if (!(Math.abs(determinant) > 0))
    throw new WcsError('The WCS matrix (CD, or PC with CDELT) is singular: pixels have no size.')
  const referencePoint = [
    required(header, `CRVAL${longitude}`) * scales[longitude - 1],
    required(header, `CRVAL${latitude}`) * scales[latitude - 1],
  ] as const
  if (Math.abs(referencePoint[1]) > 90) {
    throw new WcsError(`The WCS has CRVAL${latitude} = ${referencePoint[1]} degrees; a latitude is between -90 and 90.`)
  }
  refuseSlant(header, latitude, projection)
  return {
    projection,
    frame: readFrame(header, pair),
    referencePixel: [required(header, 'CRPIX1'), required(header, 'CRPIX2')],
    referencePoint,
    matrix,
    poleLongitudeDeg: poleLongitude(header, longitude, referencePoint[1]),
    sip: first[3] === undefined && second[3] === undefined ? null : readSip(header),
    size: readSize(header),
  }
}

function isLongitude(name: string): boolean {
  return name === 'RA--' || name.endsWith('LON')
}

function refuseCelestialElsewhere(header: FitsHeader): void {
  for (let axis = 3; axis <= 4; axis++) {
    const type = String(header[`CTYPE${axis}`] ?? '')
    if (CELESTIAL.test(type.trim().toUpperCase())) {
      throw new WcsError(
        `The WCS has its celestial axis CTYPE${axis} = '${type}' on axis ${axis}; axes 1 and 2 must be the celestial ones.`,
      )
    }
  }
}

function optional(header: FitsHeader, keyword: string): number | undefined {
  const value = header[keyword]
  if (value === undefined) return undefined
  if (typeof value === 'number') return value
  throw new WcsError(`The WCS has ${keyword} = '${value}', which is not a number.`)
}

function required(header: FitsHeader, keyword: string): number {
  const value = optional(header, keyword)
  if (value !== undefined) return value
  throw new WcsError(`The WCS has no ${keyword}: the position of the image is unknown.`)
}

function unitScale(header: FitsHeader, axis: number): number {
  const unit = String(header[`CUNIT${axis}`] ?? 'deg').trim()
  const scale = unit === '' ? 1 : DEGREES_PER_UNIT[unit.toLowerCase()]
  if (scale !== undefined) return scale
  throw new WcsError(`The WCS has CUNIT${axis} = '${unit}'; deg, arcmin, arcsec, mas and rad are read.`)
}

/** Intermediate world coordinates per pixel, in the header's units. Paper I, equations 1-3; CROTA2: paper II, equation 189. */
function linearMatrix(header: FitsHeader): [[number, number], [number, number]] {
  const element = (prefix: string) => [1, 2].map((i) => [1, 2].map((j) => optional(header, `${prefix}${i}_${j}`)))
  const cd = element('CD')
  if (cd.flat().some((value) => value !== undefined)) {
    return [
      [cd[0][0] ?? 0, cd[0][1] ?? 0],
      [cd[1][0] ?? 0, cd[1][1] ?? 0],
    ]
  }
  const pc = element('PC')
  const hasPc = pc.flat().some((value) => value !== undefined)
  const [step1, step2] = [optional(header, 'CDELT1'), optional(header, 'CDELT2')]
  if (!hasPc && (step1 === undefined || step2 === undefined)) {
    throw new WcsError('The WCS has neither CD nor CDELT keywords: the pixel scale is unknown.')
  }
  const [delta1, delta2] = [step1 ?? 1, step2 ?? 1]
  if (hasPc) {
    return [
      [delta1 * (pc[0][0] ?? 1), delta1 * (pc[0][1] ?? 0)],
      [delta2 * (pc[1][0] ?? 0), delta2 * (pc[1][1] ?? 1)],
    ]
  }
  const angle = ((optional(header, 'CROTA2') ?? optional(header, 'CROTA1') ?? 0) * Math.PI) / 180
  const [c, s] = [Math.cos(angle), Math.sin(angle)]
  return [
    [delta1 * c, -delta2 * s],
    [delta1 * s, delta2 * c],
  ]
}

/** FITS Standard 4.0, 8.3: no RADESYS and no EQUINOX is ICRS; EQUINOX alone is FK4 before 1984 and FK5 from then on. */
function readFrame(header: FitsHeader, pair: string): SkyFrame {
  if (pair === 'GLONGLAT') return 'GALACTIC'
  if (pair !== 'RA--DEC-') {
    throw new WcsError(
      `The WCS is in '${header.CTYPE1}' coordinates; right ascension and declination or galactic ones are read.`,
    )
  }
  const equinox = optional(header, 'EQUINOX') ?? optional(header, 'EPOCH')
  const named = String(header.RADESYS ?? header.RADECSYS ?? '')
    .trim()
    .toUpperCase()
  const system = named !== '' ? named : equinox === undefined ? 'ICRS' : equinox < 1984 ? 'FK4' : 'FK5'
  if (system === 'ICRS') return 'ICRS'
  if (system !== 'FK5')
    throw new WcsError(`The WCS is in the system ${system}; ICRS, FK5 and galactic coordinates are read.`)
  if ((equinox ?? 2000) !== 2000) {
    throw new WcsError(`The WCS is FK5 with EQUINOX = ${equinox}; only 2000 is read. Precess the header to J2000.`)
  }
  return 'FK5'
}

/** Paper II, 2.2 and 2.4: by default 180 degrees, and 0 when the reference point is the pole itself. */
function poleLongitude(header: FitsHeader, longitude: number, latitudeDeg: number): number {
  return optional(header, `PV${longitude}_3`) ?? optional(header, 'LONPOLE') ?? (latitudeDeg >= 90 ? 0 : 180)
}

/** Slant orthographic (paper II, 5.1.5) and moved native origins (2.5) change the formulas; zero is the plain case. */
function refuseSlant(header: FitsHeader, latitude: number, projection: string): void {
  const longitude = 3 - latitude
  const keywords = projection === 'SIN' ? [`PV${latitude}_1`, `PV${latitude}_2`] : []
  for (const keyword of [...keywords, `PV${longitude}_1`, `PV${longitude}_2`]) {
    const value = optional(header, keyword) ?? 0
    if (value !== 0)
      throw new WcsError(`The WCS has ${keyword} = ${value}, a slanted or moved projection, which is not read.`)
  }
}

/** Only with the -SIP suffix, which says that the coefficients are meant (astropy applies them without it too). */
function readSip(header: FitsHeader): Sip {
  const terms = (letter: 'A' | 'B') => {
    const order = required(header, `${letter}_ORDER`)
    if (!Number.isInteger(order) || order < 0 || order > 9)
      throw new WcsError(`The WCS has ${letter}_ORDER = ${order}; SIP takes 0 to 9.`)
    const found: [number, number, number][] = []
    for (let p = 0; p <= order; p++) {
      for (let q = 0; p + q <= order; q++) {
        const factor = optional(header, `${letter}_${p}_${q}`)
        if (factor !== undefined && factor !== 0) found.push([p, q, factor])
      }
    }
    return found
  }
  return { x: terms('A'), y: terms('B') }
}

function readSize(header: FitsHeader): Wcs['size'] {
  const [width, height] = [header.NAXIS1, header.NAXIS2]
  return typeof width === 'number' && typeof height === 'number' && width > 0 && height > 0 ? [width, height] : null
}
