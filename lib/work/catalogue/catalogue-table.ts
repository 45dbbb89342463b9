import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { noteShown } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { thumbnailsOf } from './candidate-table'
import { catalogueEntries, type CatalogueEntry } from './catalogue-entries'
import { mayExport } from './export-catalogue'

export interface CatalogueTableRow extends Omit<CatalogueEntry, 'remarks' | 'reason' | 'tags'> {
  tags: string
  thumbnail: string | null
}

export interface CatalogueTable {
  rows: CatalogueTableRow[]
  /**
   * For graders: only what they have judged themselves is here, whatever else there is. How much else, or whether anything, is not
   * told: with one candidate left to grade the number would be its verdict.
   */
  ownOnly: boolean
  mayExport: boolean
}

/** The whole catalogue for its table, as far as this person may see it. */
export async function catalogueTable(db: Kysely<DB>, permit: CampaignPermit<'read'>): Promise<CatalogueTable> {
  const rows: CatalogueTableRow[] = []
  for await (const entries of catalogueEntries(db, permit)) {
    const ids = entries.map((entry) => entry.id)
    await noteShown(db, permit, ids)
    const thumbnails = await thumbnailsOf(db, permit, ids)
    for (const { remarks: _remarks, reason: _reason, tags, ...entry } of entries) {
      rows.push({ ...entry, tags: tags.map(({ tag }) => tag).join(', '), thumbnail: thumbnails.get(entry.id) ?? null })
    }
  }
  return { rows, ownOnly: permit.role === 'grader', mayExport: mayExport(permit) }
}
