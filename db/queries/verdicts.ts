import type { Kysely } from 'kysely'
import type { DB } from '../schema'
import type { Rule } from '../schema/campaigns'
import type { GradeLetter } from '../schema/grading'
import type { CandidateState } from '../schema/intake'
import type { IsoTime, Json } from '../schema/values'
import { countedAnswers } from './consensus'

export interface EvidenceAnswer {
  id: number
  personId: number
  name: string
  /** null for a person who is no member and never was. */
  pseudonym: string | null
  grade: GradeLetter
  occasion: 'first' | 'repeat' | 'asked'
  tags: Json<string[]>
  remark: string | null
  seconds: number | null
  givenAt: IsoTime
}

/** The counted answers of one candidate with who gave them, in order of their ids; as they stood at the grade `upTo`, or now. */
export async function listAnswersOf(db: Kysely<DB>, candidateId: number, upTo?: number): Promise<EvidenceAnswer[]> {
  return countedAnswers(db, upTo)
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
    .where('grade.candidate_id', '=', candidateId)
    .orderBy('grade.id')
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
