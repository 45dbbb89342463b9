/**
 * A release, made by the use case and its job from a real database, before the judges of the trade: stilts votlint, xmllint with the
 * IVOA schema 1.4, astropy, Python's csv, json, hashlib and zipfile. Everything that a person can type is in it.
 */
import { execFileSync } from 'node:child_process'
import { mkdtemp, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import path from 'node:path'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { listReleaseEntries } from '@/db/queries/releases'
import type { ReleaseEntry } from '@/db/schema/releases'
import type { CellValue } from '@/lib/science/formats/columns'
import {
  addGraded,
  makeReleaseScenario,
  publishAndMake,
  type ReleaseScenario,
} from '@/lib/work/releases/_release-scenario'
import { RELEASE_COLUMNS } from '@/lib/work/releases/release-columns'
import { reproduce } from '@/lib/work/releases/reproduce'
import { askAstropy, describeConformance, validateAgainstSchema, votlint } from './_table-tools'

const NASTY = [
  '=HYPERLINK("http://example.test"), as a formula',
  '@SUM(A1)',
  'a "quoted" word, a comma; a semicolon',
  'two\nlines, then\n\na third',
  '<b>bold</b> & &amp; ]]> <!-- x -->',
  "'single' and \\ backslash\tand a tab",
  'θ_E ≈ 1.2″, naïve é, 引力透镜, 😀',
  'null',
]

let scenario: ReleaseScenario
let folder = ''
let entries: ReleaseEntry[] = []
const at = (name: string) => path.join(folder, name)
const isText = (index: number) => /char/i.test(RELEASE_COLUMNS[index].datatype)
const valuesOf = (entry: ReleaseEntry) => RELEASE_COLUMNS.map((column) => column.value(entry))

beforeAll(async () => {
  scenario = await makeReleaseScenario({ gradesWanted: 4, leastGrades: 3 })
  for (const [index, text] of NASTY.entries()) {
    await addGraded(scenario, `${text} ${index}`, index % 2 ? 'AAB ' : 'AABU', {
      raDeg: 359.99999999999994 - index / 7,
      decDeg: -1e-13 - index * 7.3,
      remark: text,
      tags: [text, 'arc'],
    })
  }
  await addGraded(scenario, 'no lens', 'NNNN')
  const { files, release } = await publishAndMake(scenario, {
    title: 'Lenses "of" the <north> & ]]> field, 深',
    description: NASTY.join('\n').replaceAll('\t', ' '),
    authors: 'Heron, Grey\nThe "Saltmarsh" & Co.: #1',
  })
  entries = await listReleaseEntries(scenario.db, release.id, { after: 0, limit: 100 })
  folder = await mkdtemp(path.join(tmpdir(), 'ringside-conformance-'))
  for (const { name, sha256 } of files) await writeFile(at(name), await scenario.tools.blobs.read(sha256))
})
afterAll(async () => {
  await scenario.end()
  await rm(folder, { recursive: true, force: true })
})

const python = (script: string, ...argv: string[]): unknown =>
  JSON.parse(execFileSync('/usr/bin/python3', ['-c', script, ...argv], { encoding: 'utf8' }))

describeConformance.each(['catalogue.vot', 'catalogue-binary2.vot'])('%s of a release', (name) => {
  it('leaves votlint nothing to say, is valid against the schema, and gives astropy every value', () => {
    expect(votlint(at(name))).toBe('')
    expect(validateAgainstSchema(at(name))).toMatchObject({ succeeded: true })
    const read = askAstropy<{
      valid: boolean
      report: string
      infos: [string, string][]
      fields: { unitFault: string | null; name: string; ucd: string | null }[]
      rows: CellValue[][]
    }>('read-votable.py', at(name))
    expect(read.valid, read.report).toBe(true)
    expect(read.fields.map((field) => field.unitFault)).toEqual(RELEASE_COLUMNS.map(() => null))
    expect(read.fields.map((field) => field.ucd)).toEqual(RELEASE_COLUMNS.map(({ ucd }) => ucd))
    expect(read.infos.filter(([info]) => info === 'caution')).toHaveLength(2)
    expect(read.rows).toEqual(
      entries.map((entry) => valuesOf(entry).map((value, index) => (isText(index) ? (value ?? '') : value))),
    )
  })
})

describeConformance('the other files of a release', () => {
  const typed = (text: string, index: number): CellValue => (text === '' ? null : isText(index) ? text : Number(text))

  it("give Python's csv and json modules and astropy the same values", () => {
    const { columns, records } = askAstropy<{ columns: string[]; records: string[][] }>(
      'read-csv.py',
      at('catalogue.csv'),
    )
    expect(columns).toEqual(RELEASE_COLUMNS.map((column) => column.name))
    expect(records.slice(1).map((row) => row.map(typed))).toEqual(entries.map(valuesOf))
    const json = python(
      'import json, sys; print(json.dumps(json.load(open(sys.argv[1], encoding="utf-8"))))',
      at('catalogue.json'),
    )
    expect((json as { entries: Record<string, CellValue>[] }).entries.map((entry) => Object.values(entry))).toEqual(
      entries.map(valuesOf),
    )
  })

  it.each([
    'candidates.csv',
    'grades.csv',
    'graders.csv',
    'measurements.csv',
    'catalogue-columns.csv',
    'other-columns.csv',
    'changes.csv',
  ])('%s is one that every row of has as many fields as its header', (name) => {
    const lengths = python(
      'import csv, json, sys; print(json.dumps([len(r) for r in csv.reader(open(sys.argv[1], newline="", encoding="utf-8"), strict=True)]))',
      at(name),
    ) as number[]
    expect(new Set(lengths).size).toBe(1)
  })

  it('are those that SHA256SUMS names, to the last byte, inside an archive that Python finds whole', () => {
    const faults = python(
      `import hashlib, json, sys, zipfile
zip = zipfile.ZipFile(sys.argv[1])
faults = [zip.testzip()] if zip.testzip() else []
sums = dict(reversed(line.split("  ", 1)) for line in zip.read("SHA256SUMS").decode().splitlines())
faults += [name for name, expected in sums.items() if hashlib.sha256(zip.read(name)).hexdigest() != expected]
faults += [name for name in zip.namelist() if name != "SHA256SUMS" and name not in sums]
print(json.dumps({"faults": faults, "files": len(sums)}))`,
      at('RELEASE.zip'),
    )
    expect(faults).toEqual({ faults: [], files: 16 })
  })

  it('come with the picture of each entry under its address, and with its hash', () => {
    const hashes = python(
      `import hashlib, json, sys, zipfile
zip = zipfile.ZipFile(sys.argv[1])
print(json.dumps({name: hashlib.sha256(zip.read(name)).hexdigest() for name in zip.namelist()}))`,
      at('stamps.zip'),
    )
    expect(hashes).toEqual(
      Object.fromEntries(entries.map((entry) => [`${entry.entry_key}/colour.png`, entry.thumbnail])),
    )
  })

  it('have a citation that a YAML reader takes', () => {
    const cff = python(
      'import json, sys\ntry:\n import yaml\n print(json.dumps(yaml.safe_load(open(sys.argv[1], encoding="utf-8")), default=str))\nexcept ModuleNotFoundError:\n print("null")',
      at('CITATION.cff'),
    )
    // PyYAML comes with astropy on Debian.
    expect(cff).toMatchObject({
      'cff-version': '1.2.0',
      title: 'Lenses "of" the <north> & ]]> field, 深',
      authors: [{ 'family-names': 'Heron', 'given-names': 'Grey' }, { name: 'The "Saltmarsh" & Co.: #1' }],
    })
  })

  it('reproduce every verdict', async () => {
    expect(await reproduce(at('RELEASE.zip'))).toMatchObject({ verdicts: 9, differences: [] })
  })
})
