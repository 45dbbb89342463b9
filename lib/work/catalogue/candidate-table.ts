import 'server-only'
import type { Kysely } from 'kysely'
import {
  listEntryAnswers,
  listThumbnails,
  readCandidateRows,
  type CandidateRow,
  type EntryAnswer,
} from '@/db/queries/catalogue'
import { countListed, listJudged } from '@/db/queries/listing'
import { countVotes } from '@/db/queries/verdicts'
import type { DB } from '@/db/schema'
import type { StateCause } from '@/db/schema/intake'
import type { GradeLetter } from '@/db/schema/grading'
import { noteShown } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { stampUrl } from '@/lib/work/stamps/candidate-pictures'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import { besideRows, type BesideRow } from './beside-rows'
import { byCandidate, countTags } from './catalogue-entries'
import { asListed, saysJudgement, type ListedCandidate } from './list-candidates'
import type { TableColumnName, TableInput } from './table-input'
import { listFilter, radiiFor, tableSlice } from './table-slice'

export interface CandidateTableRow extends ListedCandidate, BesideRow {
  /** null while withheld */
  votes: Record<GradeLetter, number> | null
  thumbnail: string | null
  lensRedshift: number | null
  sourceRedshift: number | null
  /** What the state rests on; null while it is open, or withheld. */
  decidedBy: StateCause | null
  /** UTC, of an entry of the catalogue. */
  enteredAt: string | null
  /** Only where they were asked for. */
  tags: string
  remarks: string
}

export interface CandidateTable {
  rows: CandidateTableRow[]
  /** Candidates that the filter lets through, on all pages. */
  count: number
  /** Candidates without any filter. */
  all: number
  /** The rule in force is that of reliability: rows are told by their lens probability. */
  byReliability: boolean
}

const LEAD_ONLY: readonly (TableColumnName | 'id')[] = ['score', 'calibration']

/** What a role may not ask is passed over. */
function allowed(input: TableInput, isLead: boolean): TableInput {
  const may = (column: TableColumnName | 'id') => isLead || !LEAD_ONLY.includes(column)
  const { filter, order } = input
  return {
    ...input,
    filter: {
      ...filter,
      notSentOn: isLead && filter.notSentOn,
      columns: filter.columns?.filter(({ column }) => may(column)),
    },
    order: may(order) ? order : 'name',
  }
}

/** A page of the table of candidates. Score, calibration and the first pass sort and filter for leads only, and are passed over for others. */
export async function candidateTable(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  input: TableInput,
): Promise<CandidateTable> {
  const scope = candidateScope(permit)
  const asked = allowed(input, permit.role === 'lead')
  const radii = await radiiFor(db, permit, asked)
  const filter = listFilter(asked.filter, radii)
  // What a filter leaves out is told as much as what it finds.
  if (scope.judgedBy !== null) await noteShown(db, permit, await listJudged(db, scope, filter))
  const all = await countListed(db, scope, 'candidates', {})
  const { ids, count } = await tableSlice(db, scope, 'candidates', { ...asked, filter, radii, all })
  const found = await readCandidateRows(db, ids)
  const listed = await asListed(db, permit, found)
  const open = listed.filter((row) => !row.withheld).map((row) => row.id)
  const votes = await countVotes(db, open, permit.role === 'grader' ? permit.viewer.id : undefined)
  const counts = (id: number) => votes.get(id) ?? { A: 0, B: 0, C: 0, N: 0, U: 0 }
  const told = listed.filter((row) => saysJudgement(row) || (!row.withheld && hasOthers(counts(row.id))))
  await noteShown(
    db,
    permit,
    told.map(({ id }) => id),
  )
  const thumbnails = await thumbnailsOf(db, permit, ids)
  const source = new Map(found.map((row) => [row.id, row]))
  const beside = await besideRows(db, permit, ids)
  const answers = input.withAnswers
    ? await listEntryAnswers(db, scope.campaignId, open, scope.judgedBy ?? undefined)
    : []
  const answersOf = byCandidate(answers)
  return {
    count,
    all,
    byReliability: (await ruleInForce(db, permit.campaign.id)).method === 'reliability',
    rows: listed.map((row) => ({
      ...row,
      ...madeOf(row.withheld ? undefined : source.get(row.id)),
      ...beside(row.id),
      ...wordsOf(answersOf.get(row.id) ?? []),
      votes: row.withheld ? null : counts(row.id),
      thumbnail: thumbnails.get(row.id) ?? null,
    })),
  }
}

const NOTHING = { lensRedshift: null, sourceRedshift: null, decidedBy: null, enteredAt: null }

function madeOf(row: CandidateRow | undefined) {
  if (!row) return NOTHING
  const { lensRedshift, sourceRedshift, decidedBy, enteredAt } = row
  return { lensRedshift, sourceRedshift, decidedBy, enteredAt }
}

/** Tags, most frequent first, and remarks under pseudonyms. */
export function wordsOf(answers: readonly Pick<EntryAnswer, 'tags' | 'remark' | 'by'>[]) {
  return {
    tags: countTags(answers)
      .map(({ tag }) => tag)
      .join(', '),
    remarks: answers.flatMap(({ by, remark }) => (remark ? [`${by}: ${remark}`] : [])).join(' · '),
  }
}

/** The reader's own vote is one of them. */
function hasOthers(votes: Record<GradeLetter, number>): boolean {
  return Object.values(votes).reduce((sum, count) => sum + count, 0) > 1
}

/** Addresses of small pictures, by candidate. */
export async function thumbnailsOf(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  candidateIds: readonly number[],
): Promise<Map<number, string>> {
  const stamps = await listThumbnails(db, permit.campaign.id, candidateIds)
  return new Map(stamps.map(({ candidateId, sha256 }) => [candidateId, stampUrl(permit.campaign.slug, sha256)]))
}
