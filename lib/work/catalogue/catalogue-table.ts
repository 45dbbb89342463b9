import 'server-only'
import type { Kysely } from 'kysely'
import { countListed, listEntriesNotShown } from '@/db/queries/listing'
import type { DB } from '@/db/schema'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import { noteShown } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { besideRows, type BesideRow } from './beside-rows'
import { thumbnailsOf } from './candidate-table'
import { catalogueEntriesAmong, type CatalogueEntry } from './catalogue-entries'
import { mayExport } from './export-catalogue'
import type { TableInput } from './table-input'
import { listFilter, radiiFor, tableSlice } from './table-slice'

export interface CatalogueTableRow extends Omit<CatalogueEntry, 'remarks' | 'reason' | 'tags' | 'knownAs'>, BesideRow {
  tags: string
  remarks: string
  thumbnail: string | null
}

export interface CatalogueTable {
  rows: CatalogueTableRow[]
  /** Entries that the filter lets through, on all pages, and entries without any filter. */
  count: number
  all: number
  /**
   * For graders: only what they have judged themselves is here, whatever else there is. How much else, or whether anything, is not
   * told: with one candidate left to grade the number would be its verdict.
   */
  ownOnly: boolean
  mayExport: boolean
  byReliability: boolean
}

const AS_IT_COMES: TableInput = { filter: {}, order: 'id', descending: false, page: 0, pageSize: 100 }

/** A page of the catalogue, as far as this person may see it. */
export async function catalogueTable(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  input: TableInput = AS_IT_COMES,
): Promise<CatalogueTable> {
  const scope = candidateScope(permit)
  // Of each of their candidates the table tells whether it is in the catalogue, whatever page is looked at.
  const own = scope.judgedBy === null ? null : await listEntriesNotShown(db, scope)
  if (own) await noteShown(db, permit, own.notShown)
  const radii = await radiiFor(db, permit, input)
  const filter = listFilter(input.filter, radii)
  const all = own?.all ?? (await countListed(db, scope, 'catalogue', {}))
  const { ids, count } = await tableSlice(db, scope, 'catalogue', { ...input, filter, radii, all })
  const beside = await besideRows(db, permit, ids)
  const thumbnails = await thumbnailsOf(db, permit, ids)
  const entries = await catalogueEntriesAmong(db, permit, ids)
  return {
    rows: entries.map(({ remarks, reason: _reason, tags, ...entry }) => ({
      ...entry,
      ...beside(entry.id),
      tags: tags.map(({ tag }) => tag).join(', '),
      remarks: remarks.map(({ by, remark }) => `${by}: ${remark}`).join(' · '),
      thumbnail: thumbnails.get(entry.id) ?? null,
    })),
    count,
    all,
    ownOnly: permit.role === 'grader',
    mayExport: mayExport(permit),
    byReliability: (await ruleInForce(db, permit.campaign.id)).method === 'reliability',
  }
}
