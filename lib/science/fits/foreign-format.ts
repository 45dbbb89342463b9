// Files that are something else than FITS, told by their first bytes and never by their name.
import { FitsError, type FitsFault } from '@/lib/science/fits/fits-types'

interface ForeignFormat {
  name: string
  magic: readonly number[]
  fault: FitsFault
  advice: string
}

const PICTURE_ADVICE = 'Send the FITS image that it was made from.'
const FOREIGN: readonly ForeignFormat[] = [
  {
    name: 'a ZIP archive',
    magic: [0x50, 0x4b, 0x03, 0x04],
    fault: 'unsupported',
    advice: 'Unpack it and send the FITS files inside.',
  },
  {
    name: 'bzip2-compressed',
    magic: [0x42, 0x5a, 0x68],
    fault: 'unsupported',
    advice: 'Unpack it with bunzip2, or pack it with gzip instead.',
  },
  {
    name: 'xz-compressed',
    magic: [0xfd, 0x37, 0x7a, 0x58],
    fault: 'unsupported',
    advice: 'Unpack it with unxz, or pack it with gzip instead.',
  },
  {
    name: 'Zstandard-compressed',
    magic: [0x28, 0xb5, 0x2f, 0xfd],
    fault: 'unsupported',
    advice: 'Unpack it with unzstd, or pack it with gzip instead.',
  },
  { name: 'gzip-compressed twice', magic: [0x1f, 0x8b], fault: 'unsupported', advice: 'Unpack it once.' },
  { name: 'a PNG picture', magic: [0x89, 0x50, 0x4e, 0x47], fault: 'not-fits', advice: PICTURE_ADVICE },
  { name: 'a JPEG picture', magic: [0xff, 0xd8, 0xff], fault: 'not-fits', advice: PICTURE_ADVICE },
  { name: 'a GIF picture', magic: [0x47, 0x49, 0x46, 0x38], fault: 'not-fits', advice: PICTURE_ADVICE },
  { name: 'an HDF5 file', magic: [0x89, 0x48, 0x44, 0x46], fault: 'not-fits', advice: 'Export the image as FITS.' },
  { name: 'a PDF document', magic: [0x25, 0x50, 0x44, 0x46], fault: 'not-fits', advice: PICTURE_ADVICE },
]

const FIRST_CARD = /^SIMPLE {2}= +[TF](?![^ /])/

/** Refuses what does not begin with a SIMPLE card (FITS Standard 4.0, 4.4.1.1). Reads the first bytes only. */
export function refuseForeignFormat(bytes: Uint8Array): void {
  if (bytes.length === 0) throw new FitsError('empty', 'The file is empty (0 bytes).')
  const first = String.fromCharCode(...bytes.subarray(0, 80))
  if (FIRST_CARD.test(first)) return
  const known = FOREIGN.find(({ magic }) => magic.every((byte, index) => bytes[index] === byte))
  if (known) {
    throw new FitsError(known.fault, `The file is ${known.name}, not a plain FITS file. ${known.advice}`)
  }
  const found = [...first.slice(0, 30)].map((letter) => (/[\x20-\x7e]/.test(letter) ? letter : '?')).join('')
  if ('SIMPLE  ='.startsWith(first.slice(0, 9)) && bytes.length < 80) {
    throw new FitsError(
      'truncated-header',
      `Only the first ${bytes.length} bytes of a FITS header are present: the file is cut off.`,
    )
  }
  throw new FitsError(
    'not-fits',
    `This is not a FITS file: it begins with "${found}" where "SIMPLE  =                    T" must stand.`,
  )
}
