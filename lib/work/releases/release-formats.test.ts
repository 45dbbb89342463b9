import fc from 'fast-check'
import Papa from 'papaparse'
import { expect, it } from 'vitest'
import type { ReleaseEntry } from '@/db/schema/releases'
import { toJson } from '@/db/schema/values'
import { readVotable } from '@/lib/science/formats/read-votable'
import { csvDocument } from '@/lib/science/formats/write-csv'
import { votableDocument } from '@/lib/science/formats/write-votable'
import { votableBinary2Document } from '@/lib/science/formats/write-votable-binary2'
import { replaceIllegal } from '@/lib/science/formats/xml-text'
import { RELEASE_COLUMNS } from './release-columns'

const meta = { tableName: 'catalogue', description: 'Invented', infos: [] }

/** An entry with these words and place in every column that takes them. */
const entryOf = (words: string, raDeg: number, decDeg: number): ReleaseEntry => ({
  id: 1,
  release_id: 1,
  row_number: 1,
  candidate_id: 1,
  entry_key: 'SWS-J1',
  designation: words,
  name: words,
  ra_deg: raDeg,
  dec_deg: decDeg,
  zone: 0,
  class: 'A',
  mean: 2.5,
  spread: 0.1,
  probability: null,
  votes_a: 1,
  votes_b: 0,
  votes_c: 0,
  votes_n: 0,
  cannot_judge: 0,
  decided_by: 'verdict',
  reason: words,
  remarks: words,
  tags: words,
  known_as: toJson([{ list: words, name: words, separationArcsec: 0.25, keptOutOfNew: true }]),
  einstein_radius_arcsec: 1.2,
  einstein_radius_error_arcsec: null,
  n_measured: 1,
  measurement: null,
  lens_redshift: null,
  source_redshift: 2.379,
  entered_at: '2026-12-01T10:00:00.000Z',
  thumbnail: null,
  stamps: toJson({}),
})

const words = fc.string({ unit: 'binary', minLength: 1, maxLength: 60 })
const places = {
  ra: fc.double({ min: 0, max: 360, maxExcluded: true, noNaN: true }),
  dec: fc.double({ min: -90, max: 90, noNaN: true }),
}
const textOf = async (pieces: AsyncIterable<string>) => {
  let text = ''
  for await (const piece of pieces) text += piece
  return text
}

/** Each format's columns, read by a reader that knows nothing of the writer, as texts or numbers by column name. */
const FORMATS: Record<string, (entry: ReleaseEntry) => Promise<Record<string, unknown>>> = {
  CSV: async (entry) => {
    const text = await textOf(csvDocument(RELEASE_COLUMNS, [entry]))
    return Papa.parse<Record<string, string>>(text, { header: true, newline: '\r\n', skipEmptyLines: true }).data[0]
  },
  TABLEDATA: async (entry) => votableRow(await textOf(votableDocument(meta, RELEASE_COLUMNS, [entry]))),
  BINARY2: async (entry) => votableRow(await textOf(votableBinary2Document(meta, RELEASE_COLUMNS, [entry]))),
  JSON: async (entry) =>
    JSON.parse(
      JSON.stringify(Object.fromEntries(RELEASE_COLUMNS.map(({ name, value }) => [name, value(entry)]))),
    ) as Record<string, unknown>,
}

function votableRow(text: string): Record<string, unknown> {
  const { fields, columns, problems } = readVotable(text)
  expect(problems).toEqual([])
  return Object.fromEntries(fields.map(({ name }, index) => [name, columns[index][0]]))
}

const TEXT_COLUMNS = ['designation', 'name', 'reason', 'remarks', 'tags']

it.each(Object.keys(FORMATS))('%s gives any text back, but for what XML itself cannot hold', async (format) => {
  await fc.assert(
    fc.asyncProperty(words, async (text) => {
      const row = await FORMATS[format](entryOf(text, 10, 10))
      const expected = format === 'CSV' || format === 'JSON' ? text : replaceIllegal(text)
      for (const column of TEXT_COLUMNS) expect(row[column]).toBe(expected)
    }),
    { numRuns: 60 },
  )
})

it.each(Object.keys(FORMATS))('%s keeps any position, far closer than 1e-9 degrees', async (format) => {
  await fc.assert(
    fc.asyncProperty(places.ra, places.dec, async (raDeg, decDeg) => {
      const row = await FORMATS[format](entryOf('x', raDeg, decDeg))
      expect(Math.abs(Number(row.ra) - raDeg)).toBeLessThan(1e-9)
      expect(Math.abs(Number(row.dec) - decDeg)).toBeLessThan(1e-9)
    }),
    { numRuns: 60 },
  )
})
