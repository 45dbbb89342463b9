import { createHash } from 'node:crypto'

/** What the planes of one band are read from. */
export interface PlaneSource {
  band: string
  hdu: number
  planeIndex: number
  /** Of the file. */
  sha256: string
}

/** Changes with the form of the answer, so that no browser keeps an old one. */
const FORM = 3

/**
 * Name of a candidate's planes: of the pixels they are made of and of the recipe that goes with them. The same name is the same
 * bytes, so a browser may keep them for ever.
 * @param sources in the order of the campaign's bands.
 */
export function planesHash(sources: readonly PlaneSource[], recipeHash: string): string {
  const parts = sources.map(({ band, hdu, planeIndex, sha256 }) => [band, hdu, planeIndex, sha256])
  return createHash('sha256')
    .update(JSON.stringify([FORM, recipeHash, parts]))
    .digest('hex')
}
