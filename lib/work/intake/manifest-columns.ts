/** The columns of a manifest and the spellings in which they come. Case, blanks, `_`, `-` and `.` do not count. */
export const MANIFEST_COLUMNS = {
  file: ['file', 'filename', 'filepath', 'path', 'fits', 'fitsfile', 'image', 'cutout'],
  candidate: [
    'candidate',
    'name',
    'id',
    'candidateid',
    'candidatename',
    'objectid',
    'objid',
    'object',
    'source',
    'sourceid',
    'target',
  ],
  band: ['band', 'filter', 'filt'],
  ra: ['ra', 'radeg', 'raj2000', 'rajdeg', 'rightascension', 'alphaj2000', 'alpha'],
  dec: ['dec', 'decdeg', 'de', 'dej2000', 'decj2000', 'dedeg', 'declination', 'deltaj2000', 'delta'],
  pixelScale: ['pixelscale', 'pixscale', 'pixelscalearcsec', 'pixelsize', 'scale', 'arcsecperpixel'],
  score: ['score', 'probability', 'prob', 'rank', 'mlscore', 'cnnscore', 'lensscore', 'plens'],
  lensRedshift: ['lensredshift', 'zlens', 'zl', 'zd', 'lensz', 'redshiftlens'],
  sourceRedshift: ['sourceredshift', 'zsource', 'zs', 'zsrc', 'sourcez', 'redshiftsource'],
  // Few spellings: it makes calibration stamps, and a 'label' is as often what a machine has guessed.
  truth: ['truth', 'knowntruth', 'groundtruth', 'truelabel', 'trueclass'],
  explanation: ['explanation', 'truthexplanation', 'explain'],
} as const

export type ManifestColumn = keyof typeof MANIFEST_COLUMNS
/** Which header stands for which column. */
export type ManifestHeaders = Partial<Record<ManifestColumn, string>>
/** What a lead chose, column by column; '' is none, and a column that is not named is left to its spelling. */
export type ChosenColumns = Partial<Record<ManifestColumn, string>>

const plain = (header: string): string => header.toLowerCase().replace(/\(.*?\)|\[.*?\]|[\s_.\-#]/g, '')

/**
 * Which header stands for which column. The spellings are tried in the order above, so that `candidate` stands before `id`
 * when a table has both.
 */
export function manifestColumns(header: readonly string[], chosen: ChosenColumns = {}): ManifestHeaders {
  const bySpelling = new Map(header.toReversed().map((name) => [plain(name), name]))
  const found: ManifestHeaders = {}
  for (const [column, spellings] of Object.entries(MANIFEST_COLUMNS) as [ManifestColumn, readonly string[]][]) {
    const choice = chosen[column]
    if (choice !== undefined && (choice === '' || header.includes(choice))) {
      if (choice !== '') found[column] = choice
      continue
    }
    const spelling = spellings.find((name) => bySpelling.has(name))
    if (spelling !== undefined) found[column] = bySpelling.get(spelling)
  }
  return found
}
