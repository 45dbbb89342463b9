import type { FitsCard } from '@/lib/science/fits/write-card'
import type { Wcs } from './wcs'

const NAMES = { ICRS: ['RA---', 'DEC--'], FK5: ['RA---', 'DEC--'], GALACTIC: ['GLON-', 'GLAT-'] } as const

/** The header cards that `readWcs` reads this WCS from (FITS Standard 4.0, section 8; paper II; the SIP convention). */
export function wcsCards({
  projection,
  frame,
  referencePixel,
  referencePoint,
  matrix,
  poleLongitudeDeg,
  sip,
}: Wcs): FitsCard[] {
  const ending = sip === null ? '' : '-SIP'
  const [longitude, latitude] = NAMES[frame]
  const distortion = sip === null ? [] : [...sipCards('A', sip.x), ...sipCards('B', sip.y)]
  return [
    ...(frame === 'GALACTIC' ? [] : [{ keyword: 'RADESYS', value: frame, comment: 'frame of the coordinates' }]),
    ...(frame === 'FK5' ? [{ keyword: 'EQUINOX', value: 2000 }] : []),
    { keyword: 'CTYPE1', value: `${longitude}${projection}${ending}` },
    { keyword: 'CTYPE2', value: `${latitude}${projection}${ending}` },
    { keyword: 'CUNIT1', value: 'deg' },
    { keyword: 'CUNIT2', value: 'deg' },
    { keyword: 'CRPIX1', value: referencePixel[0], comment: 'reference pixel' },
    { keyword: 'CRPIX2', value: referencePixel[1], comment: 'reference pixel' },
    { keyword: 'CRVAL1', value: referencePoint[0], comment: '[deg] longitude there' },
    { keyword: 'CRVAL2', value: referencePoint[1], comment: '[deg] latitude there' },
    { keyword: 'CD1_1', value: matrix[0][0], comment: '[deg/pixel]' },
    { keyword: 'CD1_2', value: matrix[0][1] },
    { keyword: 'CD2_1', value: matrix[1][0] },
    { keyword: 'CD2_2', value: matrix[1][1] },
    { keyword: 'LONPOLE', value: poleLongitudeDeg },
    ...distortion,
  ]
}

function sipCards(letter: 'A' | 'B', terms: readonly (readonly [number, number, number])[]): FitsCard[] {
  const order = Math.max(2, ...terms.map(([p, q]) => p + q))
  return [
    { keyword: `${letter}_ORDER`, value: order },
    ...terms.map(([p, q, value]) => ({ keyword: `${letter}_${p}_${q}`, value })),
  ]
}
