import 'server-only'
import type { Kysely } from 'kysely'
import { findReleaseBefore } from '@/db/queries/release-changes'
import {
  countClasses,
  countReleased,
  listEntriesBeside,
  listEntryInReleases,
  listReleasedPage,
  type EntryBeside,
  type EntryClass,
  type EntryConditions,
} from '@/db/queries/release-pages'
import { findReleaseById, findReleaseEntry, listReleaseFiles, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import type { ReleaseAccess, ReleaseCosmology, ReleaseEntry, ReleaseKind } from '@/db/schema/releases'
import { fromJson, type Json } from '@/db/schema/values'
import { notFound } from '@/lib/platform/problems/problem'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { ruleInWords } from '@/lib/work/catalogue/rule-in-words'
import { cautionsOf } from './cautions'
import type { Change } from './changes'
import { licenceOf } from './licences'
import { publicReleases, releaseNumber } from './newest-standing'
import { entryDetail, entryRow, type EntryDetail, type EntryRow } from './read-entry'
import { noticesOf, releaseToRead, type Reader, type ReleaseNotice } from './read-release'
import { releasedGeometries, type ReleasedGeometry } from './released-geometries'
import { releaseFileAbout } from './release-file-about'
import { searchCone } from './search-cone'
import type { TableQuery } from './table-query'
import { changesSince } from './write-files'

export interface ReleaseHead {
  id: number
  slug: string
  number: number
  kind: ReleaseKind
  title: string
  description: string
  authors: string[]
  publisher: string
  year: number
  survey: string
  campaign: string
  acronym: string
  frozenAt: string
  howToCite: string
  licence: { name: string; id: string | null; url: string | null }
  software: string
  rule: string
  method: 'mean' | 'reliability'
  cosmology: ReleaseCosmology
  cautions: string[]
  entries: number
  candidates: number
  access: ReleaseAccess
  notices: ReleaseNotice[]
  /** What an erratum corrects or a retraction withdraws. */
  corrects: { number: number; statement: string } | null
  /** The newest public release that stands, where that is another. */
  newest: number | null
}

/** Changes that a page lists; the file has them all. */
const MOST_CHANGES = 50
/** Beyond this many entries a page sorts and searches no more, since SQLite would read them all for it. */
const MOST_SORTED = 50_000
const ENTRIES_ON_PAGE = 50

/**
 * A release for whoever may read it, by the number in its address.
 * @throws Problem 404, alike for unknown ones and for those not open to this reader.
 */
export async function readReleaseHead(
  db: Kysely<DB>,
  slug: string,
  number: string,
  reader: Reader,
): Promise<{ release: ReleaseRow; head: ReleaseHead }> {
  const release = await releaseToRead(db, slug, releaseNumber(number), reader)
  const [notices, corrected, { standing }] = await Promise.all([
    noticesOf(db, release, reader),
    release.corrects_id === null ? null : findReleaseById(db, release.corrects_id),
    publicReleases(db, slug),
  ])
  const rule = fromJson(release.rule as Json<RuleInForce>)
  const known = licenceOf(release.licence)
  const head: ReleaseHead = {
    id: release.id,
    slug: release.slug,
    number: release.number,
    kind: release.kind,
    title: release.title,
    description: release.description,
    authors: release.authors.split('\n'),
    publisher: release.publisher,
    year: release.year,
    survey: release.survey,
    campaign: release.campaign_name,
    acronym: release.acronym,
    frozenAt: release.created_at,
    howToCite: release.how_to_cite,
    licence: { name: known?.name ?? release.licence, id: known?.id ?? null, url: known?.url ?? null },
    software: release.software,
    rule: ruleInWords(rule),
    method: rule.method,
    cosmology: fromJson(release.cosmology),
    cautions: cautionsOf(release),
    entries: release.entries,
    candidates: release.candidates,
    access: release.access,
    notices,
    corrects: corrected && { number: corrected.number, statement: release.statement ?? '' },
    newest: standing && standing.number !== release.number ? standing.number : null,
  }
  return { release, head }
}

export interface ReleaseTable {
  rows: EntryRow[]
  /** How many pass the filters. */
  count: number
  pages: number
  page: number
  problems: string[]
  /** Whether there are few enough to sort and to search. */
  sortable: boolean
}

/** A page of the entries of a release that the reader may read. */
export async function readReleaseTable(db: Kysely<DB>, release: ReleaseRow, query: TableQuery): Promise<ReleaseTable> {
  const problems = [...query.problems]
  const sortable = release.entries <= MOST_SORTED
  const conditions: EntryConditions = {}
  if (sortable) {
    if (query.text) conditions.text = query.text
    if (query.classes.length) conditions.classes = query.classes
    if (query.known) conditions.known = query.known === 'yes'
  }
  if (query.near) {
    const { places } = await searchCone(db, release.id, query.near, MOST_SORTED)
    conditions.ids = places.map(({ id }) => id)
  }
  const asked = query.text !== '' || query.classes.length > 0 || query.known !== '' || query.order !== 'catalogue'
  if (!sortable && asked) {
    problems.push(
      `With more than ${MOST_SORTED.toLocaleString('en')} entries this page sorts and searches by position only. Download the catalogue for the rest.`,
    )
  }
  const isNarrowed = Object.keys(conditions).length > 0
  const count = isNarrowed ? await countReleased(db, release.id, conditions) : release.entries
  const pages = Math.max(1, Math.ceil(count / ENTRIES_ON_PAGE))
  if (query.page > pages) problems.push(`There is no page ${query.page}: this is the last.`)
  const page = Math.min(query.page, pages)
  const rows = await listReleasedPage(db, release.id, conditions, {
    order: sortable ? query.order : 'catalogue',
    descending: sortable && query.descending,
    offset: (page - 1) * ENTRIES_ON_PAGE,
    limit: ENTRIES_ON_PAGE,
  })
  return { rows: rows.map(entryRow), count, pages, page, problems, sortable }
}

export interface ReleaseContents {
  classes: { class: EntryClass; count: number }[]
  files: { name: string; about: string; mediaType: string; bytes: number; sha256: string }[]
  before: number | null
  changes: Change[]
  /** More than are listed. */
  hasMoreChanges: boolean
}

/** What else its page tells: counts, files, and what is otherwise than in the release before. */
export async function readReleaseContents(db: Kysely<DB>, release: ReleaseRow): Promise<ReleaseContents> {
  const [classes, files, before] = await Promise.all([
    countClasses(db, release.id),
    listReleaseFiles(db, release.id),
    findReleaseBefore(db, release.campaign_id, release.number),
  ])
  const changes: Change[] = []
  for await (const change of changesSince(db, release, before)) {
    changes.push(change)
    if (changes.length > MOST_CHANGES) break
  }
  return {
    classes,
    files: files.map(({ name, media_type: mediaType, bytes, sha256 }) => {
      return { name, about: releaseFileAbout(name), mediaType, bytes, sha256 }
    }),
    before: before?.number ?? null,
    changes: changes.slice(0, MOST_CHANGES),
    hasMoreChanges: changes.length > MOST_CHANGES,
  }
}

export interface EntryPage {
  entry: EntryDetail
  /** By view. Only of pictures that are the same to the last byte as those that the campaign has now, whose geometry is known. */
  geometries: Record<string, ReleasedGeometry>
  row: ReleaseEntry
  before: EntryBeside | null
  after: EntryBeside | null
  /** Other public releases that have it, newest first. */
  alsoIn: { number: number; key: string; withdrawn: boolean }[]
}

/** @throws Problem 404 where the release has no entry of that key. */
export async function readEntryPage(db: Kysely<DB>, release: ReleaseRow, key: string): Promise<EntryPage> {
  const row = await findReleaseEntry(db, release.id, key)
  if (!row) throw notFound('entry of this release')
  const [beside, { releases }] = await Promise.all([
    listEntriesBeside(db, release.id, row.row_number),
    publicReleases(db, release.slug),
  ])
  const others = releases.filter((one) => one.release.id !== release.id)
  const inOthers = await listEntryInReleases(
    db,
    others.map((one) => one.release.id),
    row.candidate_id,
  )
  const keys = new Map(inOthers.map(({ releaseId, key: otherKey }) => [releaseId, otherKey]))
  return {
    entry: entryDetail(row),
    geometries: await releasedGeometries(db, release, row),
    row,
    before: beside.find(({ rowNumber }) => rowNumber < row.row_number) ?? null,
    after: beside.find(({ rowNumber }) => rowNumber > row.row_number) ?? null,
    alsoIn: others.flatMap(({ release: { id, number }, retractedBy }) => {
      const other = keys.get(id)
      return other === undefined ? [] : [{ number, key: other, withdrawn: retractedBy !== null }]
    }),
  }
}
