import type { ReleaseRow } from '@/db/queries/releases'
import { cautionsOf } from './cautions'
import { licenceInWords, licenceOf } from './licences'

type Cited = Pick<
  ReleaseRow,
  | 'acronym'
  | 'authors'
  | 'created_at'
  | 'description'
  | 'how_to_cite'
  | 'kind'
  | 'licence'
  | 'number'
  | 'publisher'
  | 'software'
  | 'statement'
  | 'survey'
  | 'title'
  | 'year'
> & {
  /** Where the release can be read. */
  address: string
  /** Of an erratum or a retraction: what it corrects or withdraws. */
  corrected: { number: number; address: string } | null
}

/** `Family, Given` is a person; anything else a person or group by its whole name. */
function splitName(author: string): { family: string; given: string } | null {
  const parts = author.split(',').map((part) => part.trim())
  return parts.length === 2 && parts[0] && parts[1] ? { family: parts[0], given: parts[1] } : null
}

/** `CITATION.txt`. */
export function citationText(release: Cited): string {
  return [
    'Please cite this release as:',
    '',
    release.how_to_cite,
    '',
    `It is published under: ${licenceInWords(release.licence)}`,
    '',
    ...cautionsOf(release),
    '',
  ].join('\n')
}

/** A JSON string is a double-quoted YAML scalar (YAML 1.2, section 7.3.1 and 10.2), whatever the text. */
const yaml = (text: string): string =>
  JSON.stringify(text).replaceAll('\u0085', '\\u0085').replaceAll('\u2028', '\\u2028')

/** `CITATION.cff`: Citation File Format 1.2.0 (https://doi.org/10.5281/zenodo.5171937). */
export function citationCff(release: Cited): string {
  const authors = release.authors.split('\n').flatMap((author) => {
    const person = splitName(author)
    return person
      ? [`  - family-names: ${yaml(person.family)}`, `    given-names: ${yaml(person.given)}`]
      : [`  - name: ${yaml(author)}`]
  })
  const licence = licenceOf(release.licence)
  return [
    'cff-version: 1.2.0',
    `message: ${yaml(`If you use this catalogue, please cite it: ${release.how_to_cite}`)}`,
    'type: dataset',
    `title: ${yaml(release.title)}`,
    `abstract: ${yaml([release.description, ...cautionsOf(release)].join('\n\n'))}`,
    'authors:',
    ...authors,
    `version: ${yaml(String(release.number))}`,
    `date-released: ${yaml(release.created_at.slice(0, 10))}`,
    `url: ${yaml(release.address)}`,
    ...(licence ? [`license: ${licence.id}`] : []),
    '',
  ].join('\n')
}

/**
 * `datacite.json`: DataCite Metadata Schema 4.5 (2024), in the JSON form that its REST API takes, without a DOI: the repository that
 * takes the deposit gives it. Mandatory by section 2: identifier (the DOI), creators, titles, publisher, publicationYear, types.
 */
export function dataciteJson(release: Cited, files: { sizes: string[]; formats: string[] }): string {
  const licence = licenceOf(release.licence)
  const isRetraction = release.kind === 'retraction'
  const description = (text: string, descriptionType: string) => ({ description: text, descriptionType, lang: 'en' })
  return (
    JSON.stringify(
      {
        schemaVersion: 'http://datacite.org/schema/kernel-4',
        types: {
          resourceTypeGeneral: 'Dataset',
          resourceType: isRetraction
            ? 'Retraction of a catalogue'
            : 'Catalogue of candidate strong gravitational lenses',
        },
        creators: release.authors.split('\n').map((author) => {
          const person = splitName(author)
          return person
            ? { name: author, nameType: 'Personal', familyName: person.family, givenName: person.given }
            : { name: author }
        }),
        titles: [{ title: release.title, lang: 'en' }],
        publisher: { name: release.publisher },
        publicationYear: String(release.year),
        subjects: [
          { subject: 'strong gravitational lensing', lang: 'en' },
          { subject: 'sky surveys', lang: 'en' },
          { subject: release.survey },
        ],
        dates: [{ date: release.created_at.slice(0, 10), dateType: 'Created', dateInformation: 'frozen' }],
        language: 'en',
        alternateIdentifiers: [{ alternateIdentifier: release.address, alternateIdentifierType: 'URL' }],
        ...(release.corrected
          ? {
              relatedIdentifiers: [
                {
                  relatedIdentifier: release.corrected.address,
                  relatedIdentifierType: 'URL',
                  relationType: 'Obsoletes',
                  resourceTypeGeneral: 'Dataset',
                },
              ],
            }
          : {}),
        sizes: files.sizes,
        formats: files.formats,
        version: String(release.number),
        rightsList: licence
          ? [
              {
                rights: licence.name,
                rightsUri: licence.url,
                rightsIdentifier: licence.id,
                rightsIdentifierScheme: 'SPDX',
                schemeUri: 'https://spdx.org/licenses/',
              },
            ]
          : [{ rights: release.licence }],
        descriptions: [
          description(release.description, 'Abstract'),
          description(cautionsOf(release).join(' '), 'Other'),
          description(`Made with ${release.software}.`, 'TechnicalInfo'),
          ...(release.statement ? [description(release.statement, 'Other')] : []),
        ],
      },
      null,
      2,
    ) + '\n'
  )
}
