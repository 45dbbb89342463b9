import 'server-only'
import type { Kysely } from 'kysely'
import { findReleaseById, type ReleaseRow } from '@/db/queries/releases'
import type { DB } from '@/db/schema'
import { fromJson, type Json } from '@/db/schema/values'
import { votableDocument, type VotableMeta } from '@/lib/science/formats/write-votable'
import { votableBinary2Document } from '@/lib/science/formats/write-votable-binary2'
import { escapeXml } from '@/lib/science/formats/xml-text'
import type { RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { coneColumns } from './cone-columns'
import type { ConeQuery } from './cone-query'
import { noticesOf, type ReleaseNotice } from './read-release'
import { releaseAddress } from './release-address'
import { entriesAt, searchCone } from './search-cone'
import { votableMeta } from './write-files'

export interface ConeAsk {
  db: Kysely<DB>
  release: ReleaseRow
  query: ConeQuery
  siteUrl: string
  /** Of a link, where the release was opened with one. */
  token: string | null
  signal?: AbortSignal
}

/**
 * The answer to a cone search, in pieces: the search is done before the first one, the rows are read as they are sent. Without a
 * radius or without records it is the columns alone: by section 2 item 3 of Simple Cone Search 1.03, and by DALI 1.1 section 3.4.4,
 * where MAXREC=0 is told as an overflow.
 */
export async function coneDocument(ask: ConeAsk): Promise<AsyncGenerator<string, void, void>> {
  const { db, release, query, signal } = ask
  const asksForColumns = query.radiusDeg === 0 || query.mostRecords === 0
  const found = asksForColumns
    ? { places: [], overflow: query.mostRecords === 0 }
    : await searchCone(db, release.id, query, query.mostRecords, signal)
  const infosBehind = found.overflow ? [{ name: 'QUERY_STATUS', value: 'OVERFLOW' }] : []
  const meta = { ...(await metaOf(ask)), infosBehind }
  const columns = coneColumns(query.verbosity)
  const rows = entriesAt(db, found.places)
  return query.format === 'binary2' ? votableBinary2Document(meta, columns, rows) : votableDocument(meta, columns, rows)
}

async function metaOf({ db, release, siteUrl, token }: ConeAsk): Promise<VotableMeta> {
  const older = release.corrects_id === null ? null : await findReleaseById(db, release.corrects_id)
  const address = (number: number) => releaseAddress(siteUrl, release.slug, number)
  const meta = votableMeta({
    frozen: { release, rule: fromJson(release.rule as Json<RuleInForce>) },
    address: address(release.number),
    corrected: older && { number: older.number, address: address(older.number) },
  })
  const notices = await noticesOf(db, release, { viewer: null, token })
  return {
    ...meta,
    tableName: `release_${release.number}`,
    infos: [
      { name: 'standardID', value: 'ivo://ivoa.net/std/ConeSearch' },
      ...notices.map((notice) => ({ name: notice.kind, value: noticeInWords(notice) })),
      ...meta.infos,
    ],
  }
}

function noticeInWords({ kind, number, statement }: ReleaseNotice): string {
  return kind === 'retraction'
    ? `This release is withdrawn by release ${number}: ${statement}`
    : `This release is corrected by release ${number}: ${statement}`
}

/**
 * The error document of Simple Cone Search 1.03, section 2 item 3: an INFO named Error right below VOTABLE, the place that the standard
 * prefers. QUERY_STATUS says the same to clients of DALI 1.1 (section 4.4.2).
 */
export function coneErrorDocument(sentence: string): string {
  const text = escapeXml(sentence)
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    '<VOTABLE version="1.4" xmlns="http://www.ivoa.net/xml/VOTable/v1.3">',
    '<DESCRIPTION>Cone search that could not be answered</DESCRIPTION>',
    `<INFO ID="Error" name="Error" value="${text}"/>`,
    '<RESOURCE type="results">',
    `<INFO name="QUERY_STATUS" value="ERROR">${text}</INFO>`,
    '</RESOURCE>',
    '</VOTABLE>',
    '',
  ].join('\n')
}
