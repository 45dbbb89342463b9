import type { ReleaseEntry } from '@/db/schema/releases'
import { fromJson } from '@/db/schema/values'
import type { CellValue, Column } from '@/lib/science/formats/columns'
import { CAUTION, EXPORT_COLUMNS } from '@/lib/work/catalogue/export-columns'

/** A column that the working catalogue has too, by its name there, so that both say the same of it. */
function same(name: string, value: (entry: ReleaseEntry) => CellValue): Column<ReleaseEntry> {
  const known = EXPORT_COLUMNS.find((column) => column.name === name)
  if (!known) throw new Error(`The catalogue has no column ${name}.`)
  return { ...known, value }
}

/** `name (list, 0.31 arcsec); …` */
export const labelsInWords = (entry: Pick<ReleaseEntry, 'known_as'>): string | null =>
  fromJson(entry.known_as)
    .map(({ name, list, separationArcsec }) => `${name} (${list}, ${separationArcsec.toFixed(2)} arcsec)`)
    .join('; ') || null

/** No reference list whose objects are kept out of new lists knows it. */
const isNew = (entry: Pick<ReleaseEntry, 'known_as'>): boolean =>
  fromJson(entry.known_as).every(({ keptOutOfNew }) => keptOutOfNew === false)

/** The columns of a released catalogue in every format and in its cone search. Names are kept stable. */
export const RELEASE_COLUMNS: readonly Column<ReleaseEntry>[] = [
  {
    ...same('designation', (entry) => entry.designation),
    description:
      'Designation by the IAU rule: coordinates truncated, not rounded. Its acronym must be registered before it is published; ' +
      'Ringside does not register it',
  },
  {
    name: 'entry',
    datatype: 'char',
    ucd: 'meta.id',
    description:
      "Last part of the entry's permanent address: its designation without characters that an address cannot hold",
    value: (entry) => entry.entry_key,
  },
  same('name', (entry) => entry.name),
  same('ra', (entry) => entry.ra_deg),
  same('dec', (entry) => entry.dec_deg),
  same('grade_class', (entry) => entry.class),
  same('mean_points', (entry) => entry.mean),
  same('spread_points', (entry) => entry.spread),
  {
    ...same('probability', (entry) => entry.probability),
    description:
      'Probability that this is a lens, from the grades weighed by the reliability of the graders; empty by the mean method',
  },
  same('n_grades', (entry) => entry.votes_a + entry.votes_b + entry.votes_c + entry.votes_n),
  same('n_cannot_judge', (entry) => entry.cannot_judge),
  same('votes_a', (entry) => entry.votes_a),
  same('votes_b', (entry) => entry.votes_b),
  same('votes_c', (entry) => entry.votes_c),
  same('votes_n', (entry) => entry.votes_n),
  same('decided_by', (entry) => entry.decided_by),
  same('reason', (entry) => entry.reason),
  same('remarks', (entry) => entry.remarks),
  same('tags', (entry) => entry.tags),
  same('known_as', labelsInWords),
  {
    name: 'new',
    datatype: 'char',
    ucd: 'meta.code',
    description:
      'yes or no: no where a reference list that is kept out of new lists has the object; a list that is not so kept makes it known only',
    value: (entry) => (isNew(entry) ? 'yes' : 'no'),
  },
  same('einstein_radius', (entry) => entry.einstein_radius_arcsec),
  same('einstein_radius_error', (entry) => entry.einstein_radius_error_arcsec),
  same('n_measured', (entry) => entry.n_measured),
  same('lens_redshift', (entry) => entry.lens_redshift),
  same('source_redshift', (entry) => entry.source_redshift),
  same('entered_at', (entry) => entry.entered_at),
  {
    name: 'thumbnail_sha256',
    datatype: 'char',
    ucd: 'meta.id;meta.file',
    description: 'SHA-256 of the colour stamp in stamps.zip; empty where there is none',
    value: (entry) => entry.thumbnail,
  },
  {
    name: 'basis',
    datatype: 'char',
    ucd: 'meta.note',
    description: `What the row rests on. ${CAUTION}`,
    value: () => 'visual grade, not a spectroscopic confirmation',
  },
]
