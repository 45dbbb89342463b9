import 'server-only'
import type { Kysely } from 'kysely'
import {
  countCandidateSlice,
  listCandidateSlice,
  listThumbnails,
  type CandidateFilter,
  type CandidateOrder,
} from '@/db/queries/catalogue'
import { countVotes } from '@/db/queries/verdicts'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import { noteShown } from '@/lib/work/grading/may-reveal'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { stampUrl } from '@/lib/work/stamps/candidate-pictures'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { ruleInForce } from '@/lib/work/campaigns/rule-in-force'
import { asListed, saysJudgement, type ListedCandidate } from './list-candidates'

export interface CandidateTableRow extends ListedCandidate {
  /** null while withheld */
  votes: Record<GradeLetter, number> | null
  thumbnail: string | null
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

export interface CandidateTableInput {
  filter: CandidateFilter
  order: CandidateOrder
  descending: boolean
  /** from 0 */
  page: number
  pageSize: number
}

const LEAD_ORDERS: readonly CandidateOrder[] = ['score']

/** A page of the table of candidates. Score, calibration and the first pass sort and filter for leads only, and are passed over for others. */
export async function candidateTable(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  input: CandidateTableInput,
): Promise<CandidateTable> {
  const scope = candidateScope(permit)
  const isLead = permit.role === 'lead'
  const filter = isLead ? input.filter : { ...input.filter, calibration: undefined, notSentOn: false }
  const order = isLead || !LEAD_ORDERS.includes(input.order) ? input.order : 'name'
  const count = await countCandidateSlice(db, scope, filter)
  const all = await countCandidateSlice(db, scope, {})
  const rows = await listCandidateSlice(db, scope, {
    filter,
    order,
    descending: input.descending,
    offset: input.page * input.pageSize,
    limit: input.pageSize,
  })
  const listed = await asListed(db, permit, rows)
  const ids = listed.map((row) => row.id)
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
  return {
    count,
    all,
    byReliability: (await ruleInForce(db, permit.campaign.id)).method === 'reliability',
    rows: listed.map((row) => ({
      ...row,
      votes: row.withheld ? null : counts(row.id),
      thumbnail: thumbnails.get(row.id) ?? null,
    })),
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
