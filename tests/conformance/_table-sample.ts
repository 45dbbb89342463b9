/** A catalogue of invented lenses with everything in its cells that breaks careless writers. */
import { mkdtempSync, rmSync } from 'node:fs'
import { writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll } from 'vitest'
import type { Column } from '@/lib/science/formats/columns'

export interface SampleLens {
  designation: string
  ra: number
  dec: number
  outcome: string
  spread: number | null
  graders: number | null
  theta: number | null
  mass: number | null
  dispersion: number | null
  redshift: number | null
  ruled: boolean | null
  decided: string | null
  remark: string | null
}

// UCDs: IVOA UCD1+ list. Units: VOUnits 1.0.
export const SAMPLE_COLUMNS: Column<SampleLens>[] = [
  {
    name: 'designation',
    datatype: 'char',
    ucd: 'meta.id;meta.main',
    description: 'Designation',
    value: (r) => r.designation,
  },
  {
    name: 'ra',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.ra;meta.main',
    description: 'Right ascension, ICRS',
    value: (r) => r.ra,
  },
  {
    name: 'dec',
    datatype: 'double',
    unit: 'deg',
    ucd: 'pos.eq.dec;meta.main',
    description: 'Declination, ICRS',
    value: (r) => r.dec,
  },
  {
    name: 'outcome',
    datatype: 'char',
    ucd: 'meta.code.class',
    description: 'A visual grade, "not" a confirmation by spectroscopy',
    value: (r) => r.outcome,
  },
  {
    name: 'spread',
    datatype: 'double',
    ucd: 'stat.stdev',
    description: 'Spread of the grade points',
    value: (r) => r.spread,
  },
  {
    name: 'n_graders',
    datatype: 'short',
    ucd: 'meta.number',
    nullValue: -1,
    description: 'Number of graders',
    value: (r) => r.graders,
  },
  {
    name: 'theta_e',
    datatype: 'double',
    unit: 'arcsec',
    ucd: 'phys.angSize',
    description: 'Einstein radius',
    value: (r) => r.theta,
  },
  {
    name: 'm_e',
    datatype: 'double',
    unit: 'solMass',
    ucd: 'phys.mass',
    description: 'Mass inside it',
    value: (r) => r.mass,
  },
  {
    name: 'sigma',
    datatype: 'double',
    unit: 'km/s',
    ucd: 'phys.veloc.dispersion',
    description: 'Velocity dispersion',
    value: (r) => r.dispersion,
  },
  {
    name: 'z_lens',
    datatype: 'float',
    ucd: 'src.redshift',
    description: 'Redshift of the lens',
    value: (r) => r.redshift,
  },
  { name: 'ruled', datatype: 'boolean', ucd: 'meta.code', description: 'Whether a lead ruled', value: (r) => r.ruled },
  {
    name: 'decided',
    datatype: 'char',
    ucd: 'time.processing',
    xtype: 'timestamp',
    description: 'When it was decided',
    value: (r) => r.decided,
  },
  { name: 'remark', datatype: 'unicodeChar', ucd: 'meta.note', description: 'Remark', value: (r) => r.remark },
]

const plain: SampleLens = {
  designation: 'SWS J100024.00+021200.0',
  ra: 150.1,
  dec: 2.2,
  outcome: 'confirmed',
  spread: Math.SQRT2 / 3,
  graders: 6,
  theta: 1.17,
  mass: 2.1e11,
  dispersion: 251,
  redshift: 0.5,
  ruled: true,
  decided: '2026-12-01T12:00:00',
  remark: 'arc to the north-east',
}

export const SAMPLE_LENSES: SampleLens[] = [
  plain,
  {
    ...plain,
    designation: 'SWS J235959.99-000000.3',
    ra: 359.99999999999994,
    dec: -1e-13,
    spread: null,
    graders: null,
    theta: null,
    mass: null,
    dispersion: null,
    redshift: null,
    ruled: null,
    decided: null,
    remark: null,
  },
  ...[
    '=HYPERLINK("x"), as a formula',
    'a "quoted" word, a comma; a semicolon',
    'two\nlines, then\n\na third after a blank one',
    'tab\there',
    '<b>bold</b> & &amp; ]]> <!-- x -->',
    "'single' and \\ backslash",
    'θ_E ≈ 1.2″, naïve é, e\u0301, 引力透镜, 😀',
    '12',
    'null',
    '#comment',
    'before\u2028after a line separator',
  ].map((remark, index): SampleLens => ({
    ...plain,
    designation: `SWS J0049${String(index).padStart(2, '0')}.96+895959.9`,
    ra: 12 + index / 7,
    dec: 89.99999999999999 - index,
    graders: index,
    ruled: index % 2 === 0,
    remark,
  })),
]

const folder = mkdtempSync(join(tmpdir(), 'ringside-conformance-'))

/** Writes a document where the tools can read it, for the length of the test file. */
export async function writeDocument(name: string, chunks: AsyncIterable<string>): Promise<string> {
  const path = join(folder, name)
  await writeFile(path, chunks)
  return path
}

export function removeDocumentsAfterwards(): void {
  afterAll(() => rmSync(folder, { recursive: true, force: true }))
}
