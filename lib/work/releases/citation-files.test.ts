import fc from 'fast-check'
import { expect, it } from 'vitest'
import type { ReleaseRow } from '@/db/queries/releases'
import { citationCff, citationText, dataciteJson } from './citation-files'

const release = (more: Partial<ReleaseRow> = {}) => ({
  acronym: 'SWS',
  authors: 'Heron, Grey\nThe Saltmarsh Collaboration',
  created_at: '2026-12-01T10:00:00.000Z',
  description: 'Lenses.',
  how_to_cite: 'Heron, G. (2026).',
  kind: 'release' as const,
  licence: 'CC-BY-4.0',
  number: 2,
  publisher: 'Saltmarsh Wide Survey',
  software: 'Ringside 1',
  statement: null,
  survey: 'Saltmarsh Wide Survey',
  title: 'Lenses of the north field',
  year: 2026,
  address: 'https://ringside.saltmarsh.test/r/north/2',
  corrected: null,
  ...more,
})
const metadata = (more: Partial<ReleaseRow> = {}) =>
  JSON.parse(dataciteJson(release(more), { sizes: ['17 entries'], formats: ['text/csv'] }))

// DataCite Metadata Schema 4.5 (22 January 2024), section 2.2 and table 1: creator, title, publisher, publicationYear and resourceType
// are mandatory, with the identifier, which the repository that takes the deposit registers.
it('has every property of DataCite 4.5 that is mandatory, the DOI left to the repository', () => {
  const made = metadata()
  expect(made.schemaVersion).toBe('http://datacite.org/schema/kernel-4')
  expect(made).not.toHaveProperty('doi')
  expect(made.creators).toEqual([
    { name: 'Heron, Grey', nameType: 'Personal', familyName: 'Heron', givenName: 'Grey' },
    { name: 'The Saltmarsh Collaboration' },
  ])
  expect(made.titles).toEqual([{ title: 'Lenses of the north field', lang: 'en' }])
  expect(made.publisher).toEqual({ name: 'Saltmarsh Wide Survey' })
  expect(made.publicationYear).toBe('2026')
  // Appendix 1, table 10: controlled list of resourceTypeGeneral.
  expect(made.types).toMatchObject({ resourceTypeGeneral: 'Dataset' })
})

it('keeps to the controlled lists of DataCite 4.5 for dates, descriptions, relations and identifiers', () => {
  const made = metadata({ kind: 'erratum', statement: 'Off by one.' })
  const withCorrected = JSON.parse(
    dataciteJson(
      {
        ...release({ kind: 'erratum' }),
        corrected: { number: 1, address: 'https://ringside.saltmarsh.test/r/north/1' },
      },
      { sizes: [], formats: [] },
    ),
  )
  // Tables 6 (dateType), 11 (relationType), 12 (relatedIdentifierType), 9 (descriptionType) of the appendix.
  expect(made.dates.map(({ dateType }: { dateType: string }) => dateType)).toEqual(['Created'])
  const kinds = made.descriptions.map(({ descriptionType }: { descriptionType: string }) => descriptionType)
  expect(['Abstract', 'Methods', 'SeriesInformation', 'TableOfContents', 'TechnicalInfo', 'Other']).toEqual(
    expect.arrayContaining(kinds),
  )
  expect(withCorrected.relatedIdentifiers).toEqual([
    {
      relatedIdentifier: 'https://ringside.saltmarsh.test/r/north/1',
      relatedIdentifierType: 'URL',
      relationType: 'Obsoletes',
      resourceTypeGeneral: 'Dataset',
    },
  ])
  expect(made.rightsList).toEqual([
    expect.objectContaining({ rightsIdentifier: 'CC-BY-4.0', rightsIdentifierScheme: 'SPDX' }),
  ])
  expect(metadata({ licence: 'Ask us first.' }).rightsList).toEqual([{ rights: 'Ask us first.' }])
})

it('tells authors and licence in the Citation File Format 1.2.0', () => {
  const text = citationCff(release())
  expect(text).toMatch(/^cff-version: 1\.2\.0\nmessage: "/)
  expect(text).toContain(
    '  - family-names: "Heron"\n    given-names: "Grey"\n  - name: "The Saltmarsh Collaboration"\n',
  )
  expect(text).toContain('\nlicense: CC-BY-4.0\n')
  expect(citationCff(release({ licence: 'Ask us first.' }))).not.toContain('license:')
})

it('keeps any text: in the metadata exactly, in the citation file on one line as a quoted scalar', () => {
  fc.assert(
    fc.property(fc.string({ unit: 'binary', minLength: 1 }), (text) => {
      expect(metadata({ title: text }).titles[0].title).toBe(text)
      const line = citationCff(release({ title: text }))
        .split('\n')
        .find((one) => one.startsWith('title: '))
      expect(JSON.parse(line!.slice('title: '.length))).toBe(text)
    }),
  )
})

it('says how to cite it and under which licence', () => {
  expect(citationText(release())).toMatch(/Heron, G\. \(2026\)\.[^]*CC-BY-4\.0[^]*not spectroscopic confirmations/)
})
