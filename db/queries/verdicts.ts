import { sql, type Kysely, type RawBuilder, type SqlBool } from 'kysely'
import type { DB } from '../schema'
import type { Rule } from '../schema/campaigns'
import type { GradeLetter, GradeRow } from '../schema/grading'
import type { CandidateState } from '../schema/intake'
import type { IsoTime, Json } from '../schema/values'
import { countedAnswers } from './consensus'

/**
 * The one condition of whose answers a grader is shown, of `grade`. Everybody grades a calibration stamp and nothing is judged of it:
 * all its answers would tell that it is one. So there they are shown their own, and those of people whose messages they read.
 */
export function isShownTo(graderId: number): RawBuilder<SqlBool> {
  return sql<SqlBool>`(grade.person_id = ${graderId}
    or exists (select 1 from candidate where candidate.id = grade.candidate_id and candidate.truth is null)
    or exists (select 1 from message where message.candidate_id = grade.candidate_id and message.person_id = grade.person_id))`
}

/**
 * How many of each letter count, by candidate; candidates without an answer are not in the map.
 * @param graderId a grader who is shown them
 */
export async function countVotes(
  db: Kysely<DB>,
  candidateIds: readonly number[],
  graderId?: number,
): Promise<Map<number, Record<GradeLetter, number>>> {
  const votes = new Map<number, Record<GradeLetter, number>>()
  if (candidateIds.length === 0) return votes
  const rows = await countedAnswers(db)
    .select(['grade.candidate_id as candidateId', 'grade.grade'])
    .select((e) => e.fn.countAll<number>().as('n'))
    .where(sql<boolean>`grade.candidate_id in (select value from json_each(${JSON.stringify(candidateIds)}))`)
    .$if(graderId !== undefined, (query) => query.where(isShownTo(graderId!)))
    .groupBy(['grade.candidate_id', 'grade.grade'])
    .execute()
  for (const row of rows) {
    const counts = votes.get(row.candidateId) ?? { A: 0, B: 0, C: 0, N: 0, U: 0 }
    counts[row.grade] = row.n
    votes.set(row.candidateId, counts)
  }
  return votes
}

export interface EvidenceAnswer {
  id: number
  personId: number
  name: string
  /** null for a person who is no member and never was. */
  pseudonym: string | null
  grade: GradeLetter
  occasion: GradeRow['occasion']
  tags: Json<string[]>
  remark: string | null
  seconds: number | null
  givenAt: IsoTime
}

/** Grades with who gave them, in order of their ids. */
export function asEvidence(grades: ReturnType<typeof countedAnswers>) {
  return grades
    .innerJoin('person', 'person.id', 'grade.person_id')
    .leftJoin('membership', (join) =>
      join
        .onRef('membership.person_id', '=', 'grade.person_id')
        .onRef('membership.campaign_id', '=', 'grade.campaign_id'),
    )
    .select([
      'grade.id',
      'grade.person_id as personId',
      'person.name',
      'membership.pseudonym',
      'grade.grade',
      'grade.occasion',
      'grade.tags',
      'grade.remark',
      'grade.seconds',
      'grade.given_at as givenAt',
    ])
    .orderBy('grade.id')
}

/**
 * The counted answers of one candidate with who gave them, in order of their ids.
 * @param upTo as they stood when that was the newest grade; without, as they stand now
 * @param graderId a grader who is shown them
 */
export async function listAnswersOf(
  db: Kysely<DB>,
  candidateId: number,
  { upTo, graderId }: { upTo?: number; graderId?: number } = {},
): Promise<EvidenceAnswer[]> {
  return asEvidence(countedAnswers(db, upTo))
    .where('grade.candidate_id', '=', candidateId)
    .$if(graderId !== undefined, (query) => query.where(isShownTo(graderId!)))
    .execute()
}

export interface VerdictWithRule {
  id: number
  outcome: CandidateState
  grades: number
  cannotJudge: number
  mean: number | null
  spread: number | null
  /** of a lens, by the reliability method */
  probability: number | null
  reason: string
  at: IsoTime
  rule: Rule
}

/** Every verdict of a candidate with the rule it came from, oldest first. */
export async function listVerdictsOf(db: Kysely<DB>, candidateId: number): Promise<VerdictWithRule[]> {
  const rows = await db
    .selectFrom('verdict')
    .innerJoin('run', 'run.id', 'verdict.run_id')
    .innerJoin('rule', 'rule.id', 'run.rule_id')
    .selectAll('rule')
    .select([
      'verdict.id as verdictId',
      'verdict.outcome',
      'verdict.grades',
      'verdict.cannot_judge as cannotJudge',
      'verdict.mean',
      'verdict.spread',
      'verdict.probability',
      'verdict.reason',
      'run.created_at as at',
    ])
    .where('verdict.candidate_id', '=', candidateId)
    .orderBy('verdict.id')
    .execute()
  return rows.map(({ verdictId, outcome, grades, cannotJudge, mean, spread, probability, reason, at, ...rule }) => ({
    id: verdictId,
    outcome,
    grades,
    cannotJudge,
    mean,
    spread,
    probability,
    reason,
    at,
    rule,
  }))
}
