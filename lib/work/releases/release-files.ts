/** The files of a release's archive, in their order, with their media types (RFC 4180 section 3; VOTable 1.4 section 8; RFC 8259). */
const CSV = 'text/csv; charset=utf-8; header=present'
const TEXT = 'text/plain; charset=utf-8'
const VOTABLE = 'application/x-votable+xml'
const JSON_TYPE = 'application/json'

export const RELEASE_FILES = [
  { name: 'README.txt', mediaType: TEXT, about: 'what you read' },
  { name: 'CITATION.txt', mediaType: TEXT, about: 'how to cite this release' },
  { name: 'CITATION.cff', mediaType: 'application/yaml', about: 'the same for machines, Citation File Format 1.2.0' },
  {
    name: 'datacite.json',
    mediaType: JSON_TYPE,
    about: 'metadata for a deposit, DataCite 4.5; the repository adds the DOI',
  },
  { name: 'catalogue.csv', mediaType: CSV, about: 'the catalogue, RFC 4180' },
  { name: 'catalogue-columns.csv', mediaType: CSV, about: 'unit, UCD and description of each column of the catalogue' },
  { name: 'catalogue.vot', mediaType: VOTABLE, about: 'the catalogue as VOTable 1.4, TABLEDATA' },
  { name: 'catalogue-binary2.vot', mediaType: `${VOTABLE};serialization=binary2`, about: 'the same in BINARY2' },
  { name: 'catalogue.json', mediaType: JSON_TYPE, about: 'the same as JSON' },
  { name: 'candidates.csv', mediaType: CSV, about: 'every judged candidate with its verdict and ruling' },
  { name: 'grades.csv', mediaType: CSV, about: 'every grade of these candidates, and whether it counts' },
  { name: 'graders.csv', mediaType: CSV, about: 'every grader: reliability, and grades of calibration stamps' },
  {
    name: 'measurements.csv',
    mediaType: CSV,
    about: 'what people measured on the entries: method, Einstein radius, redshifts, mass, lens models',
  },
  { name: 'other-columns.csv', mediaType: CSV, about: 'unit and description of each column of the other tables' },
  { name: 'rule.json', mediaType: JSON_TYPE, about: 'the rule, the cosmology, the method and its constants' },
  { name: 'changes.csv', mediaType: CSV, about: 'what is otherwise than in the release before' },
] as const

export type ReleaseFileName = (typeof RELEASE_FILES)[number]['name']

export const CHECKSUMS = { name: 'SHA256SUMS', mediaType: TEXT } as const
export const STAMPS = { name: 'stamps.zip', mediaType: 'application/zip' } as const
/**
 * What a browser saves a file as. Those that SHA256SUMS lists keep their names, so that it finds them; archives, which it does not
 * list, say whose they are.
 */
export const savedName = ({ slug, number }: { slug: string; number: number }, name: string): string =>
  name.endsWith('.zip') ? `${slug}-release-${number}-${name}` : name

export const ARCHIVE_TYPE = 'application/zip'
