import { invalid } from '@/lib/platform/problems/problem'

export const MOST_NAME_CHARACTERS = 255

const FITS_ENDINGS = /\.(fits|fit|fts|fz|gz)$/i

/** Control characters, line ends of Unicode, and those that turn the direction of what follows, so that a name shows as another. */
export const UNSEEN = /[\u0000-\u001f\u007f-\u009f\u2028-\u202e\u2066-\u2069]/

/**
 * The name under which a delivered file is kept: folders stay, parted by `/`. Empty parts and `.` are dropped, Unicode is
 * composed (NFC) so that one name has one spelling.
 * @throws Problem 422 for control characters, `..`, no name at all, or more than 255 characters.
 */
export function cleanFileName(raw: string): string {
  const name = raw.normalize('NFC').replaceAll('\\', '/')
  if (UNSEEN.test(name)) {
    throw invalid('The file name holds control characters. Rename the file and send it again.')
  }
  const parts = name.split('/').flatMap((part) => (part === '' || part === '.' ? [] : part))
  if (parts.includes('..')) throw invalid("The file name holds '..'. Send the name without it.")
  const kept = parts.join('/')
  if (kept.trim() === '') throw invalid('The file has no name. End the address with the name of the file.')
  if (kept.length > MOST_NAME_CHARACTERS) {
    throw invalid(
      `The file name has ${kept.length} characters with its folders; at most ${MOST_NAME_CHARACTERS} are kept.`,
    )
  }
  return kept
}

/** The name below `/files/` of an address, each part decoded by itself. */
export function fileNameOfPath(pathname: string): string {
  const rest = /\/files\/(.*)$/.exec(pathname)?.[1] ?? ''
  try {
    return cleanFileName(rest.split('/').map(decodeURIComponent).join('/'))
  } catch (cause) {
    if (cause instanceof URIError) {
      throw invalid('The file name in the address is not percent-encoded UTF-8. Encode it, such as %20 for a space.')
    }
    throw cause
  }
}

export const isManifestName = (name: string): boolean => /\.csv$/i.test(name)

/** Also kinds of archives that are not opened, so that their refusal can say what to send instead. */
export const isArchiveName = (name: string): boolean => /\.(zip|tar|tgz|tar\.\w{1,4}|tbz2?|txz|7z|rar)$/i.test(name)

export type FileKind = 'fits' | 'manifest' | 'archive'

export const kindOfName = (name: string): FileKind =>
  isManifestName(name) ? 'manifest' : isArchiveName(name) ? 'archive' : 'fits'

/** What operating systems put into folders and archives, and files that begin with a dot. */
export const isHiddenName = (name: string): boolean =>
  /(^|\/)(\.[^/]*|__MACOSX|Thumbs\.db|desktop\.ini)(\/|$)/i.test(name)

/** Without the endings .fits .fit .fts .fz .gz, however many: `a/SWS1_g.fits.fz` is `a/SWS1_g`. */
export function withoutEndings(name: string): string {
  let rest = name
  while (FITS_ENDINGS.test(rest) && rest.replace(FITS_ENDINGS, '') !== '') rest = rest.replace(FITS_ENDINGS, '')
  return rest
}

/** The last part of a name without folders and endings. */
export function baseName(name: string): string {
  return withoutEndings(name.slice(name.lastIndexOf('/') + 1))
}
