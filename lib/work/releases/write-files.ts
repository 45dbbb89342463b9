import 'server-only'
import type { Kysely } from 'kysely'
import { listBeside } from '@/db/queries/release-changes'
import { listReleaseEntries, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { ReleaseEntry } from '@/db/schema/releases'
import { fromJson } from '@/db/schema/values'
import { giveWay } from '@/lib/platform/jobs/give-way'
import { inChunks } from '@/lib/science/formats/chunks'
import type { Column } from '@/lib/science/formats/columns'
import { csvDocument } from '@/lib/science/formats/write-csv'
import { votableDocument, type VotableMeta } from '@/lib/science/formats/write-votable'
import { votableBinary2Document } from '@/lib/science/formats/write-votable-binary2'
import { ruleInWords } from '@/lib/work/catalogue/rule-in-words'
import { cautionsOf } from './cautions'
import { CHANGE_COLUMNS, changesOf, type Change } from './changes'
import { citationCff, citationText, dataciteJson } from './citation-files'
import { licenceInWords } from './licences'
import { MEASUREMENT_COLUMNS } from './measurement-columns'
import { PAGE, releasedCandidates, type Frozen } from './read-frozen'
import { readmeText } from './readme'
import { RELEASE_COLUMNS } from './release-columns'
import { RELEASE_FILES, type ReleaseFileName } from './release-files'
import { releasedMeasurements } from './released-measurements'
import {
  CANDIDATE_COLUMNS,
  GRADE_COLUMNS,
  GRADER_COLUMNS,
  type GradeOfCandidate,
  type GraderRow,
} from './released-table-columns'
import { ruleFile } from './rule-file'

/** What the files say beside what was frozen. */
export interface Surroundings {
  frozen: Frozen
  before: { id: number; number: number } | null
  corrected: { number: number; address: string } | null
  address: string
  changes: string
  stampsSha256: string
}

type Pieces = AsyncIterable<string> | Iterable<string>

/** The text of each file, made as it is read, in memory that does not grow with the catalogue. */
export function textOf(db: Kysely<DB>, name: ReleaseFileName, about: Surroundings): Pieces {
  const { frozen } = about
  const { release, rule, judged } = frozen
  const cited = { ...release, address: about.address, corrected: about.corrected }
  switch (name) {
    case 'README.txt':
      return [
        readmeText(release, rule, {
          changes: about.changes,
          corrected: about.corrected?.number ?? null,
          stampsSha256: about.stampsSha256,
          address: about.address,
        }),
      ]
    case 'CITATION.txt':
      return [citationText(cited)]
    case 'CITATION.cff':
      return [citationCff(cited)]
    case 'datacite.json':
      return [
        dataciteJson(cited, {
          sizes: [`${release.entries} entries`, `${release.candidates} judged candidates`],
          formats: ['application/zip', ...new Set(RELEASE_FILES.map(({ mediaType }) => mediaType.split(';')[0]))],
        }),
      ]
    case 'catalogue.csv':
      return csvDocument(RELEASE_COLUMNS, entriesOf(db, release.id))
    case 'catalogue-columns.csv':
      return csvDocument(COLUMN_COLUMNS, RELEASE_COLUMNS)
    case 'catalogue.vot':
      return votableDocument(votableMeta(about), RELEASE_COLUMNS, entriesOf(db, release.id))
    case 'catalogue-binary2.vot':
      return votableBinary2Document(votableMeta(about), RELEASE_COLUMNS, entriesOf(db, release.id))
    case 'catalogue.json':
      return inChunks(catalogueJson(db, about))
    case 'candidates.csv':
      return csvDocument(CANDIDATE_COLUMNS, oneByOne(releasedCandidates(db, frozen)))
    case 'grades.csv':
      return csvDocument(GRADE_COLUMNS, gradesOf(db, frozen))
    case 'graders.csv':
      return csvDocument(
        GRADER_COLUMNS,
        frozen.graders.map((grader, place): GraderRow => {
          const rates = judged.model?.graders.find(({ personId }) => personId === place) ?? null
          return { ...grader, rates: grader.leftOut ? null : rates }
        }),
      )
    case 'measurements.csv':
      return csvDocument(MEASUREMENT_COLUMNS, releasedMeasurements(db, release))
    case 'other-columns.csv':
      return csvDocument(COLUMN_COLUMNS, [
        ...inFile('candidates.csv', CANDIDATE_COLUMNS),
        ...inFile('grades.csv', GRADE_COLUMNS),
        ...inFile('graders.csv', GRADER_COLUMNS),
        ...inFile('measurements.csv', MEASUREMENT_COLUMNS),
        ...inFile('changes.csv', CHANGE_COLUMNS),
      ])
    case 'rule.json':
      return [
        ruleFile({
          kind: release.kind,
          number: release.number,
          campaign: release.campaign_name,
          rule,
          cosmology: fromJson(release.cosmology),
          recipeHash: release.recipe_hash,
          software: release.software,
          frozenAt: release.created_at,
          candidates: release.candidates,
          entries: release.entries,
          model: judged.model,
          cautions: cautionsOf(release),
        }),
      ]
    case 'changes.csv':
      return csvDocument(CHANGE_COLUMNS, changesSince(db, release, about.before))
  }
}

type Described = Pick<Column<never>, 'name' | 'unit' | 'ucd' | 'description'> & { file?: string }

const COLUMN_COLUMNS: readonly Column<Described>[] = [
  { name: 'file', datatype: 'char', description: 'File', value: ({ file = 'catalogue.csv' }) => file },
  { name: 'column', datatype: 'char', description: 'Column', value: ({ name }) => name },
  { name: 'unit', datatype: 'char', description: 'Unit, IVOA VOUnits', value: ({ unit }) => unit ?? null },
  { name: 'ucd', datatype: 'char', description: 'Kind of quantity, IVOA UCD1+', value: ({ ucd }) => ucd ?? null },
  { name: 'description', datatype: 'unicodeChar', description: 'Description', value: ({ description }) => description },
]

const inFile = (file: string, columns: readonly Omit<Column<never>, 'value'>[]): Described[] =>
  columns.map(({ name, unit, ucd, description }) => ({ file, name, unit, ucd, description }))

async function* oneByOne<Row>(pages: AsyncIterable<Row[]>): AsyncGenerator<Row, void, void> {
  for await (const page of pages) yield* page
}

/** In the order of the catalogue. */
export async function* entriesOf(db: Kysely<DB>, releaseId: number): AsyncGenerator<ReleaseEntry, void, void> {
  for (let after = 0; ; await giveWay()) {
    const page = await listReleaseEntries(db, releaseId, { after, limit: PAGE })
    yield* page
    if (page.length < PAGE) return
    after = page[page.length - 1].row_number
  }
}

async function* gradesOf(db: Kysely<DB>, frozen: Frozen): AsyncGenerator<GradeOfCandidate, void, void> {
  for await (const page of releasedCandidates(db, frozen)) {
    for (const { name, answers } of page) for (const answer of answers) yield { ...answer, candidate: name }
  }
}

/** None for the first release: there is nothing to compare it with. A retraction has no catalogue to compare. */
export async function* changesSince(
  db: Kysely<DB>,
  release: ReleaseRow,
  before: { id: number } | null,
): AsyncGenerator<Change, void, void> {
  if (before === null || release.kind === 'retraction') return
  for (let after = 0; ; await giveWay()) {
    const page = await listBeside(db, { from: before.id, to: release.id }, { after, limit: PAGE })
    for (const row of page) yield* changesOf(row)
    if (page.length < PAGE) return
    after = page[page.length - 1].candidateId
  }
}

type Titled = Pick<Surroundings, 'address' | 'corrected'> & { frozen: Pick<Frozen, 'release' | 'rule'> }

export function votableMeta({ frozen: { release, rule }, address, corrected }: Titled): VotableMeta {
  return {
    tableName: 'catalogue',
    description: `${release.title}. ${release.description} ${cautionsOf(release).join(' ')}`,
    infos: [
      ...cautionsOf(release).map((value) => ({ name: 'caution', value })),
      ...(release.statement
        ? [{ name: release.kind, value: `Of release ${corrected?.number}: ${release.statement}` }]
        : []),
      { name: 'citation', value: release.how_to_cite },
      { name: 'creator', value: release.authors.replaceAll('\n', '; ') },
      { name: 'publisher', value: release.publisher },
      { name: 'rights', value: licenceInWords(release.licence) },
      { name: 'reference_url', value: address },
      { name: 'survey', value: release.survey },
      { name: 'campaign', value: release.campaign_name },
      { name: 'release', value: String(release.number) },
      { name: 'publication_date', value: release.created_at.slice(0, 10) },
      { name: 'rule', value: ruleInWords(rule) },
      { name: 'software', value: release.software },
    ],
  }
}

async function* catalogueJson(db: Kysely<DB>, about: Surroundings): AsyncGenerator<string, void, void> {
  const { release } = about.frozen
  const columns = RELEASE_COLUMNS.map(({ name, unit, ucd, description }) => ({ name, unit, ucd, description }))
  const head = {
    cautions: cautionsOf(release),
    title: release.title,
    survey: release.survey,
    campaign: release.campaign_name,
    release: release.number,
    kind: release.kind,
    statement: release.statement,
    corrects: about.corrected,
    frozenAt: release.created_at,
    address: about.address,
    howToCite: release.how_to_cite,
    licence: release.licence,
    columns,
  }
  yield JSON.stringify(head, null, 1).slice(0, -2) + ',\n "entries": ['
  let separator = '\n'
  for await (const entry of entriesOf(db, release.id)) {
    yield separator + JSON.stringify(Object.fromEntries(RELEASE_COLUMNS.map(({ name, value }) => [name, value(entry)])))
    separator = ',\n'
  }
  yield '\n]}\n'
}
