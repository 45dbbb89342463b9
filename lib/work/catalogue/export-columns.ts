import type { Column } from '@/lib/science/formats/columns'
import type { CatalogueEntry } from './catalogue-entries'
import { GRADE_CLASS_RULE } from './grade-class'
import { remarksInText } from './remarks'

/** Stands in every file that leaves the house. */
export const CAUTION = 'Grades are visual judgements of images. They are not spectroscopic confirmations.'

/**
 * The columns of an exported catalogue, in their order, for CSV and VOTable alike. Names are kept stable.
 *
 * CSV (RFC 4180) has no place for a comment, and a line before the header would break every reader; so the caution is a column,
 * `basis`, which stays with a row that is cut out and pasted elsewhere. Text is exact in both formats, also where it begins
 * like a formula.
 */
export const EXPORT_COLUMNS: readonly Column<CatalogueEntry>[] = [
  {
    name: 'designation',
    datatype: 'unicodeChar',
    ucd: 'meta.id;meta.main',
    description: 'Designation by the IAU rule: coordinates truncated, not rounded',
    value: (entry) => entry.designation,
  },
  {
    name: 'name',
    datatype: 'unicodeChar',
    ucd: 'meta.id',
    description: 'Name of the candidate in its campaign',
    value: (entry) => entry.name,
  },
  {
    name: 'ra',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.ra;meta.main',
    description: 'Right ascension, ICRS',
    value: (entry) => entry.raDeg,
  },
  {
    name: 'dec',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.dec;meta.main',
    description: 'Declination, ICRS',
    value: (entry) => entry.decDeg,
  },
  {
    name: 'grade_class',
    datatype: 'char',
    ucd: 'meta.code.class',
    description: `Class of the visual grade: ${GRADE_CLASS_RULE}`,
    value: (entry) => entry.gradeClass,
  },
  {
    name: 'mean_points',
    datatype: 'double',
    ucd: 'meta.code.qual;stat.mean',
    description: 'Mean of the grade points: A 3, B 2, C 1, N 0',
    value: (entry) => entry.mean,
  },
  {
    name: 'spread_points',
    datatype: 'double',
    ucd: 'stat.stdev',
    description: 'Population standard deviation (divisor n) of the grade points',
    value: (entry) => entry.spread,
  },
  {
    name: 'probability',
    datatype: 'double',
    ucd: 'stat.probability',
    description:
      'Probability that this is a lens, from the grades weighed by the reliability of the graders, as of the run of its verdict; ' +
      'empty by the mean method',
    value: (entry) => entry.probability,
  },
  {
    name: 'n_grades',
    datatype: 'int',
    ucd: 'meta.number',
    description: "Number of people who gave a grade, without those who answered 'cannot judge'",
    value: ({ votes }) => votes.A + votes.B + votes.C + votes.N,
  },
  {
    name: 'n_cannot_judge',
    datatype: 'int',
    ucd: 'meta.number',
    description: "Number of people who answered 'cannot judge'",
    value: ({ votes }) => votes.U,
  },
  votes('A', 'sure lens'),
  votes('B', 'probable lens'),
  votes('C', 'possible lens'),
  votes('N', 'not a lens'),
  {
    name: 'decided_by',
    datatype: 'char',
    ucd: 'meta.code',
    description:
      "What confirmed it: 'verdict' of the campaign's rule, or 'ruling' of a lead, which stands over the verdict",
    value: (entry) => entry.decidedBy,
  },
  {
    name: 'reason',
    datatype: 'unicodeChar',
    ucd: 'meta.note',
    description: 'Reason of the verdict as of its run, or of the ruling, in words',
    value: (entry) => entry.reason || null,
  },
  {
    name: 'remarks',
    datatype: 'unicodeChar',
    ucd: 'meta.note',
    description:
      'Remarks of the graders, each on a line of its own behind the pseudonym of who made it; further lines of a remark are indented',
    value: (entry) => remarksInText(entry.remarks) || null,
  },
  {
    name: 'tags',
    datatype: 'unicodeChar',
    ucd: 'meta.note',
    description: 'What the graders saw, each with how many of them said so, most frequent first',
    value: (entry) => entry.tags.map(({ tag, count }) => `${tag} (${count})`).join('; ') || null,
  },
  {
    name: 'lens_redshift',
    datatype: 'double',
    ucd: 'src.redshift',
    description: 'Redshift of the lens, as delivered with the candidate',
    value: (entry) => entry.lensRedshift,
  },
  {
    name: 'source_redshift',
    datatype: 'double',
    ucd: 'src.redshift',
    description: 'Redshift of the lensed source, as delivered with the candidate',
    value: (entry) => entry.sourceRedshift,
  },
  {
    name: 'known_as',
    datatype: 'unicodeChar',
    ucd: 'meta.id.cross',
    description: 'Objects of reference lists within the radius of each list, nearest first: name (list, separation)',
    value: (entry) => entry.knownAs,
  },
  {
    name: 'einstein_radius',
    datatype: 'double',
    unit: 'arcsec',
    ucd: 'phys.angSize',
    description: 'Einstein radius from measurements on the images, combined over the people who measured',
    value: ({ radius }) => radius?.einsteinRadiusArcsec ?? null,
  },
  {
    name: 'einstein_radius_error',
    datatype: 'double',
    unit: 'arcsec',
    ucd: 'stat.error;phys.angSize',
    description:
      'Standard uncertainty of the Einstein radius, widened where people differ by more than their uncertainties',
    value: ({ radius }) => radius?.errorArcsec ?? null,
  },
  {
    name: 'n_measured',
    datatype: 'int',
    ucd: 'meta.number',
    description: 'Number of people whose measurements the Einstein radius combines',
    value: ({ radius }) => radius?.count ?? 0,
  },
  {
    name: 'entered_at',
    datatype: 'char',
    ucd: 'time.creation',
    xtype: 'timestamp',
    description: 'When the candidate last entered the catalogue, UTC',
    value: (entry) => entry.enteredAt,
  },
  {
    name: 'basis',
    datatype: 'char',
    ucd: 'meta.note',
    description: 'What the row rests on',
    value: () => 'visual grade, not a spectroscopic confirmation',
  },
]

function votes(letter: 'A' | 'B' | 'C' | 'N', meaning: string): Column<CatalogueEntry> {
  return {
    name: `votes_${letter.toLowerCase()}`,
    datatype: 'int',
    ucd: 'meta.number',
    description: `Number of grades ${letter}, ${meaning}`,
    value: (entry) => entry.votes[letter],
  }
}
