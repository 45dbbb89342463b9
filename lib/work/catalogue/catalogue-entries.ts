import 'server-only'
import type { Kysely } from 'kysely'
import {
  listEntriesAfter,
  listEntriesAmong,
  listEntryAnswers,
  type EntryAnswer,
  type EntryRow,
} from '@/db/queries/catalogue'
import type { DB } from '@/db/schema'
import type { GradeLetter } from '@/db/schema/grading'
import type { StateCause } from '@/db/schema/intake'
import { fromJson, type IsoTime } from '@/db/schema/values'
import { GRADE_POINTS, gradesAmong, meanAndSpread } from '@/lib/science/agreement/grades'
import { knownLabels, type KnownLabel } from '@/lib/work/matching/known-labels'
import type { StandingRadius } from '@/lib/work/measuring/standing-radii'
import type { CampaignPermit } from '@/lib/work/people/permission'
import { candidateScope } from '@/lib/work/campaigns/candidate-scope'
import { gradeClass, type GradeClass } from './grade-class'

/** A confirmed candidate as the catalogue says it. */
export interface CatalogueEntry {
  id: number
  /** null: no position is known, and a designation is made of one. */
  designation: string | null
  name: string
  /** ICRS degrees */
  raDeg: number | null
  decDeg: number | null
  gradeClass: GradeClass | null
  /** Mean and population standard deviation of the points (A 3 to N 0) of the votes below. */
  mean: number | null
  spread: number | null
  /** Of a lens, as of the verdict's run; null by the mean method, and where there is no verdict. */
  probability: number | null
  votes: Record<GradeLetter, number>
  /** A ruling stands over the verdict. */
  decidedBy: StateCause
  reason: string
  /** Standing remarks with the pseudonyms of those who made them, in the order given. */
  remarks: { by: string; remark: string }[]
  /** What the graders saw, most frequent first. */
  tags: { tag: string; count: number }[]
  lensRedshift: number | null
  sourceRedshift: number | null
  /** Objects of reference lists at its place, nearest first: 'Old ring (Marsh lenses, 0.21 arcsec)'; null without any. */
  knownAs: string | null
  /** What people measured, combined; only where it is asked for, as for a file. */
  radius?: StandingRadius | null
  enteredAt: IsoTime
}

const PAGE = 500

/**
 * The catalogue as it stands, in the order of arrival, as far as this person may see it. Read in pages by key: nothing holds
 * the database between two pages, memory does not grow with the catalogue, and each entry is as of the moment its page is read.
 *
 * Votes, mean, spread and class of one entry are counted from the same grades, so that every row agrees with itself also
 * while a run of the consensus is still to come. Grades of people who are left out of the consensus are in none of them.
 */
export async function* catalogueEntries(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
): AsyncGenerator<CatalogueEntry[], void, void> {
  const scope = candidateScope(permit)
  for (let afterId = 0; ;) {
    const rows = await listEntriesAfter(db, scope, { afterId, limit: PAGE })
    if (rows.length === 0) return
    yield await withAnswers(db, permit, rows)
    if (rows.length < PAGE) return
    afterId = rows[rows.length - 1].id
  }
}

/** These of the catalogue, in the order given; what is not in it, or not for this person to see, is left out. */
export async function catalogueEntriesAmong(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  ids: readonly number[],
): Promise<CatalogueEntry[]> {
  const scope = candidateScope(permit)
  return withAnswers(db, permit, await listEntriesAmong(db, scope, ids))
}

async function withAnswers(
  db: Kysely<DB>,
  permit: CampaignPermit<'read'>,
  rows: readonly EntryRow[],
): Promise<CatalogueEntry[]> {
  const ids = rows.map((row) => row.id)
  const answers = byCandidate(await listEntryAnswers(db, permit.campaign.id, ids))
  const known = await knownLabels(db, permit, ids)
  return rows.map((row) => ({ ...entryOf(row, answers.get(row.id) ?? []), knownAs: inWords(known.get(row.id)) }))
}

const inWords = (labels: readonly KnownLabel[] | undefined): string | null =>
  labels
    ?.map(({ name, list, separationArcsec }) => `${name} (${list}, ${separationArcsec.toFixed(2)} arcsec)`)
    .join('; ') ?? null

export function byCandidate(answers: readonly EntryAnswer[]): Map<number, EntryAnswer[]> {
  const groups = new Map<number, EntryAnswer[]>()
  for (const answer of answers) {
    const group = groups.get(answer.candidateId)
    if (group) group.push(answer)
    else groups.set(answer.candidateId, [answer])
  }
  return groups
}

function entryOf(row: EntryRow, answers: readonly EntryAnswer[]): Omit<CatalogueEntry, 'knownAs'> {
  const votes = { A: 0, B: 0, C: 0, N: 0, U: 0 }
  const counted = answers.filter(({ leftOut }) => leftOut === 0)
  for (const { grade } of counted) votes[grade] += 1
  const points = gradesAmong(counted.map(({ grade }) => grade)).map((grade) => GRADE_POINTS[grade])
  const { mean, spread } = meanAndSpread(points)
  const ruled = row.rulingId !== null
  return {
    id: row.id,
    designation: row.designation,
    name: row.name,
    raDeg: row.raDeg,
    decDeg: row.decDeg,
    gradeClass: gradeClass(row.rulingGrade, mean),
    mean,
    spread,
    probability: row.probability,
    votes,
    decidedBy: ruled ? 'ruling' : 'verdict',
    reason: (ruled ? row.rulingReason : row.verdictReason) ?? '',
    remarks: answers.flatMap(({ by, remark }) => (remark ? [{ by, remark }] : [])),
    tags: countTags(counted),
    lensRedshift: row.lensRedshift,
    sourceRedshift: row.sourceRedshift,
    enteredAt: row.enteredAt ?? row.stateSince,
  }
}

export function countTags(answers: readonly Pick<EntryAnswer, 'tags'>[]): { tag: string; count: number }[] {
  const counts = new Map<string, number>()
  for (const tag of answers.flatMap((answer) => fromJson(answer.tags))) counts.set(tag, (counts.get(tag) ?? 0) + 1)
  return [...counts]
    .map(([tag, count]) => ({ tag, count }))
    .toSorted((a, b) => b.count - a.count || (a.tag < b.tag ? -1 : 1))
}
