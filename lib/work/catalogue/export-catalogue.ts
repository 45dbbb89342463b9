import 'server-only'
import type { Kysely } from 'kysely'
import type { DB } from '@/db/schema'
import { isoTime } from '@/lib/platform/clock'
import { forbidden } from '@/lib/platform/problems/problem'
import { csvDocument } from '@/lib/science/formats/write-csv'
import { votableDocument, type VotableMeta } from '@/lib/science/formats/write-votable'
import { ruleInForce, type RuleInForce } from '@/lib/work/campaigns/rule-in-force'
import { standingMeasurements } from '@/lib/work/measuring/standing-measurements'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { catalogueEntries, type CatalogueEntry } from './catalogue-entries'
import { CAUTION, EXPORT_COLUMNS } from './export-columns'
import { ruleInWords } from './rule-in-words'

export type ExportFormat = 'csv' | 'vot'

export interface CatalogueExport {
  fileName: string
  contentType: string
  /** The file's text. Read it to the end or end it early with `return()`; either way nothing stays open. */
  text: AsyncGenerator<string, void, void>
}

const CONTENT_TYPE: Record<ExportFormat, string> = {
  // RFC 4180 section 3; VOTable 1.4 section 8.
  csv: 'text/csv; charset=utf-8; header=present',
  vot: 'application/x-votable+xml',
}

/** A file holds every verdict, and a grader must not see those of candidates that they have still to judge. */
export function mayExport(permit: CampaignPermit<'read'>): boolean {
  return permit.role !== 'grader'
}

/** The whole catalogue as a file, streamed. @throws Problem 403 for graders. */
export async function exportCatalogue(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  format: ExportFormat,
): Promise<CatalogueExport> {
  if (!mayExport(permit)) {
    throw forbidden(
      'The catalogue file holds verdicts of candidates that you may still have to grade, so graders cannot download it. ' +
        'Ask a lead or a viewer of this campaign for it.',
    )
  }
  const rule = await ruleInForce(db, permit.campaign.id)
  const now = isoTime()
  const rows = oneByOne(withRadii(db, permit))
  return {
    fileName: `${permit.campaign.slug}-catalogue-${now.slice(0, 10)}.${format}`,
    contentType: CONTENT_TYPE[format],
    text:
      format === 'csv'
        ? csvDocument(EXPORT_COLUMNS, rows)
        : votableDocument(votableMeta(permit, rule, now), EXPORT_COLUMNS, rows),
  }
}

async function* withRadii(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
): AsyncGenerator<CatalogueEntry[], void, void> {
  for await (const page of catalogueEntries(db, permit)) {
    const ids = page.map(({ id }) => id)
    const radii = await standingMeasurements(db, permit, ids)
    yield page.map((entry) => ({ ...entry, radius: radii.get(entry.id) ?? null }))
  }
}

async function* oneByOne(pages: AsyncIterable<CatalogueEntry[]>): AsyncGenerator<CatalogueEntry, void, void> {
  for await (const page of pages) yield* page
}

function votableMeta({ campaign }: CampaignPermit<'read'>, rule: RuleInForce, now: string): VotableMeta {
  return {
    tableName: 'catalogue',
    description:
      `Candidate strong gravitational lenses of the ${campaign.survey}, campaign "${campaign.name}", confirmed by visual ` +
      `grading. ${CAUTION}`,
    infos: [
      { name: 'caution', value: CAUTION },
      { name: 'survey', value: campaign.survey },
      { name: 'campaign', value: campaign.name },
      { name: 'rule', value: ruleInWords(rule, 'in force at the time of export') },
      { name: 'exported_at', value: now },
      { name: 'software', value: 'Ringside' },
    ],
  }
}
