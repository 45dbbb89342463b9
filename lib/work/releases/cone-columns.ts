import type { Column } from '@/lib/science/formats/columns'
import { ICRS_ID } from '@/lib/science/formats/columns'
import { RELEASE_COLUMNS } from './release-columns'
import type { FoundEntry } from './search-cone'

/**
 * Simple Cone Search 1.03, section 2 item 2, asks for exactly one FIELD each with these three UCDs of the first kind (UCD1). They
 * stand there in place of the UCD1+ that the same columns have in the files of a release; every other column keeps its UCD1+. VOTable
 * 1.4 takes both (section 4.5). An identifier must be text that is not repeated: that is `entry`, since two candidates can share a
 * designation.
 */
const MANDATORY: Record<string, Partial<Column<FoundEntry>>> = {
  entry: { ucd: 'ID_MAIN' },
  ra: { ucd: 'POS_EQ_RA_MAIN', ref: ICRS_ID },
  dec: { ucd: 'POS_EQ_DEC_MAIN', ref: ICRS_ID },
  // meta.main is what the three above are.
  designation: { ucd: 'meta.id' },
}

const SEPARATION: Column<FoundEntry> = {
  name: 'separation',
  datatype: 'double',
  unit: 'arcsec',
  ucd: 'pos.angDistance',
  description: 'Great-circle distance from the centre of the cone',
  value: (entry) => entry.separationArcsec,
}

const ALL: readonly Column<FoundEntry>[] = [
  ...RELEASE_COLUMNS.map((column): Column<FoundEntry> => ({ ...column, ...MANDATORY[column.name] })),
  SEPARATION,
]

const FEWEST = new Set(['entry', 'designation', 'ra', 'dec', 'grade_class', 'basis'])
/** Long texts and what is for checking only are left to VERB=3. */
const LONG = new Set([
  'reason',
  'remarks',
  'tags',
  'entered_at',
  'thumbnail_sha256',
  'votes_a',
  'votes_b',
  'votes_c',
  'votes_n',
])

/** The columns of an answer by VERB. `basis` is in each: a visual grade is not a spectroscopic confirmation. */
export function coneColumns(verbosity: 1 | 2 | 3): readonly Column<FoundEntry>[] {
  if (verbosity === 1) return ALL.filter(({ name }) => FEWEST.has(name))
  if (verbosity === 2) return ALL.filter(({ name }) => !LONG.has(name))
  return ALL
}
