/** Why a file that can be read is refused, as a stable word, and the sentence that says what was tried and what to do. */
export type IntakeFault =
  'no-band' | 'no-candidate' | 'band-taken' | 'no-columns' | 'lost' | 'reader-failed' | 'cancelled' | ArchiveFault

/** Why an archive, or some of it, is not taken. */
export type ArchiveFault =
  'not-an-archive' | 'empty-archive' | 'unsafe-archive' | 'encrypted-archive' | 'archive-bomb' | 'damaged-archive'

/** Faults that another manifest or another name pattern may cure. */
export const CURABLE_FAULTS: readonly string[] = ['no-band', 'no-candidate', 'band-taken'] satisfies IntakeFault[]

export interface Refusal {
  fault: string
  reason: string
}

const listOf = (bands: readonly string[]): string => bands.join(', ')

export function noCandidate(name: string, pattern: string): Refusal {
  return {
    fault: 'no-candidate',
    reason: `Which candidate '${name}' belongs to is not known: the name does not fit ${pattern}, and its header has no OBJECT. Rename the file, change the pattern in the settings, or send a manifest that names it.`,
  }
}

const ADD_BAND = 'Put the band into the name as the pattern has it, or send a manifest with a band column.'

export function noBand(tried: string, bands: readonly string[], advice = ADD_BAND): Refusal {
  return {
    fault: 'no-band',
    reason: `${tried} This campaign has the ${bands.length === 1 ? 'band' : 'bands'} ${listOf(bands)}. ${advice}`,
  }
}

/** The manifest names a band that the campaign does not have. */
export function foreignBand(name: string, said: string, line: number, bands: readonly string[]): Refusal {
  const advice = `Correct the band in line ${line} of the manifest and send it again, or leave that cell empty: then the file's name or its header tells the band.`
  return noBand(`The manifest gives '${name}' the band '${said}'.`, bands, advice)
}

export function bandTaken(candidate: string, band: string, holder: string): Refusal {
  return {
    fault: 'band-taken',
    reason: `Band ${band} of ${candidate} has come from '${holder}' already, and this file has other pixels. To replace it, send this one under that name; if it belongs elsewhere, rename it or send a manifest.`,
  }
}

export const LOST: Refusal = {
  fault: 'lost',
  reason: 'The bytes of this file on the server are gone or damaged. Send it again under the same name.',
}
